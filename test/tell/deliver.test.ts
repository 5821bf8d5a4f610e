import { mkdtemp, readdir, readFile, rm } from 'node:fs/promises';
import { createServer, type Server } from 'node:http';
import type { AddressInfo } from 'node:net';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { SMTPServer } from 'smtp-server';
import { afterEach, describe, expect, it } from 'vitest';
import { deliver, type Outbox } from '../../src/tell/deliver.js';
import { fileTarget } from '../../src/tell/fileTarget.js';
import { makeMessage } from '../../src/tell/messagesOf.js';
import { targetsOf } from '../../src/tell/targetsOf.js';
import { webhookTarget } from '../../src/tell/webhookTarget.js';

const message = makeMessage(
  'BX-0417',
  'target-reached',
  'a'.repeat(64),
  'conversion 98.6 % <with> its bound above 98 %',
  '/out/BX-0417/report.html',
);
const closers: (() => Promise<void>)[] = [];
afterEach(async () => {
  for (const close of closers.splice(0)) await close();
});

/** A real server on loopback that answers with the given statuses in turn; a status of 0 hangs. */
async function webServer(
  statuses: number[],
): Promise<{ url: string; seen: { key: unknown; authorization: unknown; body: string }[] }> {
  const seen: { key: unknown; authorization: unknown; body: string }[] = [];
  const server: Server = createServer((request, response) => {
    let body = '';
    request.on('data', (chunk: Buffer) => {
      body += chunk.toString();
    });
    request.on('end', () => {
      seen.push({ key: request.headers['idempotency-key'], authorization: request.headers.authorization, body });
      const status = statuses.length > 1 ? statuses.shift()! : statuses[0]!;
      if (status > 0) response.writeHead(status).end('ok');
    });
  });
  await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', resolve));
  closers.push(
    () =>
      new Promise((resolve) => {
        server.closeAllConnections();
        server.close(() => resolve());
      }),
  );
  return { url: `http://127.0.0.1:${(server.address() as AddressInfo).port}/hook`, seen };
}

function outbox(): Outbox & { entries: { key: string; to: string; state: 'delivered' | 'failed'; message?: string }[] } {
  const entries: { key: string; to: string; state: 'delivered' | 'failed'; message?: string }[] = [];
  return { entries, told: entries, record: async (entry) => void entries.push(entry) };
}

const patience = () => ({ nextMs: new Map<string, number>(), failures: new Map<string, number>() });

describe('deliver', () => {
  it('posts the documented JSON once, with its key and a token from the environment', async () => {
    const { url, seen } = await webServer([200]);
    const targets = targetsOf([{ on: ['target-reached'], webhook: url, tokenEnv: 'HOOK' }], { HOOK: 'secret' });
    const box = outbox();
    await deliver([message], targets, box, patience(), () => 0);
    await deliver([message], targets, box, patience(), () => 0);
    expect(seen.length).toBe(1);
    expect(seen[0]).toMatchObject({ key: message.key, authorization: 'Bearer secret' });
    expect(JSON.parse(seen[0]!.body)).toEqual(message);
    expect(JSON.stringify(box.entries)).not.toContain('secret');
  });

  it('tries again after a failure, with a growing wait, and records failure and delivery once', async () => {
    const { url, seen } = await webServer([500, 503, 200]);
    const targets = [webhookTarget(url, ['target-reached'], undefined)];
    const box = outbox();
    const waits = patience();
    let now = 0;
    for (const at of [0, 1000, 21_000, 30_000, 62_000]) {
      now = at;
      await deliver([message], targets, box, waits, () => now);
    }
    expect(seen.length).toBe(3);
    expect(box.entries.map(({ state }) => state)).toEqual(['failed', 'delivered']);
  });

  it('tells a target only of the events it asks for', async () => {
    const { url, seen } = await webServer([200]);
    await deliver([message], [webhookTarget(url, ['stalled'], undefined)], outbox(), patience(), () => 0);
    expect(seen.length).toBe(0);
  });

  it('gives up on a hanging server in bounded time and says so', async () => {
    const { url } = await webServer([0]);
    const box = outbox();
    const before = performance.now();
    await deliver([message], [webhookTarget(url, ['target-reached'], undefined)], box, patience(), () => 0);
    expect(performance.now() - before).toBeLessThan(20_000);
    expect(box.entries[0]).toMatchObject({ state: 'failed', message: expect.stringContaining('no answer') as string });
  });

  it('names a refused connection and goes on to the next target', async () => {
    const { url, seen } = await webServer([200]);
    const refused = webhookTarget('http://127.0.0.1:9/hook', ['target-reached'], undefined);
    const box = outbox();
    await deliver([message], [refused, webhookTarget(url, ['target-reached'], undefined)], box, patience(), () => 0);
    expect(seen.length).toBe(1);
    expect(box.entries.map(({ state }) => state)).toEqual(['failed', 'delivered']);
  });

  it('drops one file a message and does not write it again after a crash before recording', async () => {
    const folder = await mkdtemp(join(tmpdir(), 'kinetrail-drop-'));
    closers.push(() => rm(folder, { recursive: true }));
    const target = fileTarget(folder, ['target-reached']);
    await deliver([message], [target], outbox(), patience(), () => 0);
    await deliver([message], [target], outbox(), patience(), () => 0);
    const names = await readdir(folder);
    expect(names).toEqual([`target-reached-${message.key}.json`]);
    expect(JSON.parse(await readFile(join(folder, names[0]!), 'utf8'))).toEqual(message);
  });

  it('sends mail as text and escaped HTML through a real SMTP server', async () => {
    const mails: string[] = [];
    const server = new SMTPServer({
      authOptional: true,
      disabledCommands: ['STARTTLS', 'AUTH'],
      onData(stream, _session, done) {
        let text = '';
        stream.on('data', (chunk: Buffer) => {
          text += chunk.toString();
        });
        stream.on('end', () => {
          mails.push(text);
          done();
        });
      },
    });
    await new Promise<void>((resolve) => server.listen(0, '127.0.0.1', () => resolve()));
    closers.push(() => new Promise((resolve) => server.close(() => resolve())));
    const port = (server.server.address() as AddressInfo).port;
    const targets = targetsOf(
      [{ on: ['target-reached'], mail: { to: ['night@example.org'], server: `smtp://127.0.0.1:${port}` } }],
      {},
    );
    const box = outbox();
    await deliver([message], targets, box, patience(), () => 0);
    expect(box.entries).toMatchObject([{ state: 'delivered' }]);
    expect(mails[0]).toContain('Subject: BX-0417: target reached');
    expect(mails[0]).toContain('&#60;with&#62;');
    expect(mails[0]).toContain(message.key);
  });

  it('gives one key to one event, whatever the words around it', () => {
    expect(makeMessage('R', 'stalled', 's', 'one', undefined).key).toBe(makeMessage('R', 'stalled', 's', 'two', '/x').key);
    expect(makeMessage('R', 'stalled', 's', '', undefined).key).not.toBe(makeMessage('R', 'stalled', 't', '', undefined).key);
  });
});
