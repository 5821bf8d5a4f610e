import { type ChildProcess, spawn } from 'node:child_process';
import { createHash } from 'node:crypto';
import { mkdirSync, mkdtempSync, readdirSync, readFileSync, renameSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { jcamp, methodText, minutesLater } from './world.js';

/** Real processes on the real disk. */

export const driver = join(import.meta.dirname, 'watchDriver.js');
export const program = join(import.meta.dirname, '..', '..', 'bin', 'kinetrail.js');

export interface Place {
  readonly root: string;
  readonly share: string;
  readonly out: string;
  readonly method: string;
  remove(): void;
}

export function makePlace(): Place {
  const root = mkdtempSync(join(tmpdir(), 'fault-'));
  const place = { root, share: join(root, 'share'), out: join(root, 'out'), method: join(root, 'method.yaml') };
  mkdirSync(place.share);
  writeFileSync(place.method, methodText);
  return { ...place, remove: () => rmSync(root, { recursive: true, force: true }) };
}

export function pointText(index: number): string {
  return jcamp(`point ${index}`, minutesLater(10 * index), `##DATA=${index}\n`).replace('0 1 2 3', `0 1 2 ${index}`);
}

/** Writes a spectrum whose modification time lies a minute back, so that a single pass takes it at once. */
export function putFile(place: Place, name: string, text: string | Uint8Array, run = 'BX-0417'): void {
  mkdirSync(join(place.share, run), { recursive: true });
  const path = join(place.share, run, name);
  writeFileSync(`${path}.part`, text);
  const then = Date.now() / 1000 - 60;
  utimesSync(`${path}.part`, then, then);
  renameSync(`${path}.part`, path);
}

export function putPoints(place: Place, from: number, to: number): void {
  for (let index = from; index < to; index += 1) putFile(place, `tp-${String(index).padStart(4, '0')}.jdx`, pointText(index));
}

export interface Ended {
  readonly code: number | null;
  readonly signal: NodeJS.Signals | null;
  readonly stdout: string;
  readonly stderr: string;
  readonly milliseconds: number;
}

export interface Running {
  readonly child: ChildProcess;
  readonly ended: Promise<Ended>;
  /** Resolves when stderr holds the text. */
  says(text: string): Promise<void>;
}

export function start(command: string, args: readonly string[], more: { uid?: number; env?: NodeJS.ProcessEnv } = {}): Running {
  const began = performance.now();
  const child = spawn(command, args, { stdio: ['ignore', 'pipe', 'pipe'], ...more });
  let stdout = '';
  let stderr = '';
  child.stdout.on('data', (bytes: Buffer) => {
    stdout += bytes.toString();
  });
  child.stderr.on('data', (bytes: Buffer) => {
    stderr += bytes.toString();
  });
  const ended = new Promise<Ended>((resolve) => {
    child.on('close', (code, signal) => resolve({ code, signal, stdout, stderr, milliseconds: performance.now() - began }));
  });
  const says = async (text: string) => {
    for (let tries = 0; !stderr.includes(text); tries += 1) {
      if (tries > 600 || child.exitCode !== null) throw new Error(`never said "${text}": ${stderr}`);
      await new Promise((resolve) => setTimeout(resolve, 20));
    }
  };
  return { child, ended, says };
}

export function startDriver(options: object): Running {
  return start(process.execPath, [driver, JSON.stringify(options)]);
}

export function watchOnceIn({ share, out, method }: Place, more: object = {}): Promise<Ended> {
  return startDriver({ share, out, method, ...more }).ended;
}

export async function verifyIn(
  place: Place,
  run = 'BX-0417',
  withShare = true,
): Promise<{ code: number | null; failed: string[] }> {
  const { code, stdout, stderr } = await startDriver({
    verify: join(place.out, run),
    ...(withShare ? { share: place.share } : {}),
  }).ended;
  if (stdout === '') throw new Error(stderr);
  const { checks } = JSON.parse(stdout) as { checks: { state: string; message: string }[] };
  return { code, failed: checks.filter(({ state }) => state === 'fail').map(({ message }) => message) };
}

const sha256 = (bytes: Uint8Array) => createHash('sha256').update(bytes).digest('hex');

/** Hashes of what must not depend on accidents: derived numbers and stored objects. */
export function lastingIn(out: string, run = 'BX-0417'): Record<string, string> {
  const folder = join(out, run);
  const kept: Record<string, string> = {};
  for (const name of ['series.json', 'series.csv']) kept[name] = sha256(readFileSync(join(folder, name)));
  for (const store of ['raw', 'points']) {
    for (const name of readdirSync(join(folder, store)))
      kept[`${store}/${name}`] = sha256(readFileSync(join(folder, store, name)));
  }
  return kept;
}

export function hashTree(folder: string): Record<string, string> {
  const entries = readdirSync(folder, { recursive: true, withFileTypes: true }).filter((entry) => entry.isFile());
  return Object.fromEntries(
    entries.map((entry) => [join(entry.parentPath, entry.name), sha256(readFileSync(join(entry.parentPath, entry.name)))]),
  );
}

export function ledgerIn(out: string, run = 'BX-0417'): Record<string, unknown>[] {
  const lines = readFileSync(join(out, run, 'ledger.jsonl'), 'utf8').split('\n');
  return lines.slice(0, -1).map((line) => JSON.parse(line.slice(0, line.lastIndexOf('\t'))) as Record<string, unknown>);
}

export const pause = (milliseconds: number) => new Promise((resolve) => setTimeout(resolve, milliseconds));
