import { describe, expect, it } from 'vitest';
import type { InputEntry } from '../../src/record/ledgerEntry.js';
import { holdRecord } from '../../src/record/runRecord.js';
import { type Call, type Fault, faultAt, Killed, makeFaultyPort } from './faultyPort.js';
import { contextOf, failures, lasting, ledgerOf, makeWorld, nightFiles, out, pass, verify, type World } from './world.js';

const files = nightFiles(3);

async function undisturbed() {
  const world = makeWorld(files);
  const summary = await pass(world);
  expect(summary.ok).toBe(true);
  return lasting(world.disk);
}

/** The share is in the same memory: its files must be untouched whatever happened. */
function shareOf(world: World): Record<string, string> {
  return Object.fromEntries([...world.disk.files('/share')].map(([path, bytes]) => [path, bytes.toString('utf8')]));
}

async function passWith(world: World, plan: (call: Call) => Fault | undefined) {
  const port = makeFaultyPort(world.disk.port, plan);
  try {
    await pass(world, { port });
    return { port, isKilled: false };
  } catch (cause) {
    if (!(cause instanceof Killed)) throw cause;
    return { port, isKilled: true };
  }
}

async function expectRecovered(world: World, expected: Record<string, string>, what: string) {
  const acknowledged = ledgerOf(world).length;
  const again = await pass(world);
  expect(again.ok, what).toBe(true);
  expect(failures(await verify(world)), what).toEqual([]);
  expect(lasting(world.disk), what).toEqual(expected);
  expect(
    [...world.disk.files('/out').keys()].filter((path) => /\/\.new-|^\/out\/\.held-by/.test(path)),
    `${what}: left behind`,
  ).toEqual([]);
  const inputs = ledgerOf(world).filter(({ kind }) => kind === 'input') as unknown as InputEntry[];
  expect(inputs.map(({ file }) => file).sort(), what).toEqual([...new Set(inputs.map(({ file }) => file))].sort());
  expect(ledgerOf(world).length, what).toBeGreaterThanOrEqual(acknowledged);
}

describe('a watcher that is killed', () => {
  it('F02: at every call, before and after it, ends in the state of an undisturbed run', { timeout: 120_000 }, async () => {
    const expected = await undisturbed();
    let kills = 0;
    for (const when of ['before', 'after'] as const) {
      for (let n = 1; ; n += 1) {
        const world = makeWorld(files);
        const before = shareOf(world);
        const { isKilled } = await passWith(world, faultAt(n, { kind: 'kill', when }));
        if (!isKilled) break;
        kills += 1;
        await expectRecovered(world, expected, `killed ${when} call ${n}`);
        expect(shareOf(world)).toEqual(before);
      }
    }
    expect(kills).toBeGreaterThan(300);
  });

  it('F05: by a power cut at every call keeps what was acknowledged and leaves no empty file under a final name', {
    timeout: 120_000,
  }, async () => {
    const expected = await undisturbed();
    for (let n = 1; ; n += 1) {
      const world = makeWorld(files);
      const { isKilled } = await passWith(world, faultAt(n, { kind: 'kill', when: 'after' }));
      if (!isKilled) break;
      const acknowledged = world.events.filter(({ kind }) => kind === 'taken').map(({ file }) => file);
      world.disk = world.disk.afterPowerCut();
      for (const [path, bytes] of world.disk.files('/out')) {
        if (!path.includes('/.')) expect(bytes.length, `${path} after a power cut at call ${n}`).toBeGreaterThan(0);
      }
      const kept = ledgerOf(world)
        .filter(({ kind }) => kind === 'input')
        .map(({ file }) => file);
      expect(kept, `acknowledged before call ${n}`).toEqual(expect.arrayContaining(acknowledged));
      await expectRecovered(world, expected, `power cut after call ${n}`);
    }
  });

  it('F03: between object and ledger adopts the object and makes no duplicate', async () => {
    const expected = await undisturbed();
    const world = makeWorld(files);
    let appends = 0;
    const plan = ({ operation, path }: Call): Fault | undefined =>
      operation === 'write' && path.endsWith('ledger.jsonl') && ++appends === 3 ? { kind: 'kill', when: 'before' } : undefined;
    expect((await passWith(world, plan)).isKilled).toBe(true);
    expect(world.disk.files('/out/BX-0417/points').size).toBeGreaterThan(0);
    await expectRecovered(world, expected, 'killed before the append');
  });

  it('F05: killed, started again, and then without power keeps what the second start acknowledged', {
    timeout: 120_000,
  }, async () => {
    const expected = await undisturbed();
    for (let n = 1; ; n += 1) {
      const world = makeWorld(files);
      const { isKilled } = await passWith(world, faultAt(n, { kind: 'kill', when: 'before' }));
      if (!isKilled) break;
      expect((await pass(world)).ok).toBe(true);
      world.disk = world.disk.afterPowerCut();
      expect(failures(await verify(world)), `killed before call ${n}`).toEqual([]);
      expect(lasting(world.disk), `killed before call ${n}`).toEqual(expected);
    }
  });

  it('F05: a line that was written but not synced is synced by whoever opens the ledger next, before anything is built on it', async () => {
    const world = makeWorld(files);
    let appends = 0;
    const plan = ({ operation, path }: Call): Fault | undefined =>
      operation === 'write' && path.endsWith('ledger.jsonl') && ++appends === 3 ? { kind: 'kill', when: 'after' } : undefined;
    expect((await passWith(world, plan)).isKilled).toBe(true);
    const lines = ledgerOf(world).length;
    expect(ledgerOf({ ...world, disk: world.disk.afterPowerCut() })).toHaveLength(lines - 1);
    // Without the lock no takeover is noted, whose own sync would hide a missing one.
    world.disk.remove(`${out}/BX-0417/.held-by`);
    const held = await holdRecord({ context: contextOf(world), outputFolder: out, names: ['BX-0417'], run: 'BX-0417' });
    expect(held.ok && held.value.lines().length).toBeGreaterThanOrEqual(lines);
    const seen = held.ok ? held.value.lines().filter(({ entry }) => entry.kind === 'input').length : 0;
    world.disk = world.disk.afterPowerCut();
    expect(ledgerOf(world).filter(({ kind }) => kind === 'input')).toHaveLength(seen);
  });

  it('F04: between ledger and report renders the report at the next start', async () => {
    const world = makeWorld(files);
    const plan = ({ operation, path }: Call): Fault | undefined =>
      operation === 'rename' && path.endsWith('series.json') ? { kind: 'kill', when: 'before' } : undefined;
    expect((await passWith(world, plan)).isKilled).toBe(true);
    expect(world.disk.files().has('/out/BX-0417/report.html')).toBe(false);
    const measured = ledgerOf(world).filter(({ kind }) => kind === 'input').length;
    await pass(world);
    expect(world.disk.files().has('/out/BX-0417/report.html')).toBe(true);
    expect(ledgerOf(world).filter(({ kind }) => kind === 'input').length).toBe(measured);
  });
});
