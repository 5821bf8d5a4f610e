import { fail, ok, type Result } from '../../src/base/result.js';
import { sha256 } from '../../src/base/sha256.js';
import type { PointRecord } from '../../src/point/pointRecord.js';
import type { Clock } from '../../src/record/clock.js';
import type { FilePort } from '../../src/record/filePort.js';
import { type MeasureTask, makeMeasurer } from '../../src/record/measurer.js';
import type { RecordContext } from '../../src/record/recordContext.js';
import { verifyRun } from '../../src/record/verifyRun.js';
import type { Verification } from '../../src/record/verifyTypes.js';
import { renderSeriesCsv } from '../../src/series/renderSeriesCsv.js';
import { renderSeriesJson } from '../../src/series/renderSeriesJson.js';
import { type OpenWatch, openWatch } from '../../src/watch/openWatch.js';
import { makeRecordRenderer } from '../../src/watch/recordRenderer.js';
import { makeShareReader } from '../../src/watch/shareReader.js';
import { type OnceSummary, watchOnce } from '../../src/watch/watchOnce.js';
import type { WatchEvent, WatchSettings } from '../../src/watch/watchTypes.js';
import { makeDisk, type SimulatedDisk } from './simulatedDisk.js';

/** A share, an output folder, a clock and a cheap measurement, all in memory: a whole night takes milliseconds. */

export const startMs = Date.UTC(2027, 0, 15, 20);
export const share = '/share';
export const out = '/out';
export const methodPath = '/methods/method.yaml';

export const methodText = `kinetrail: method/1
title: Acetylation of benzyl alcohol
version: "3"
nucleus: 1H
reference: {signal: tetramethylsilane, shift: 0.0}
species:
  - id: alcohol
    role: starting-material
    signals: [{id: CH2, listed: "4.69 (s, 2H)"}]
  - id: ester
    role: product
    signals: [{id: OCH2, listed: "5.11 (s, 2H)"}]
conversion: {of: alcohol, to: ester, target: 0.98}
`;

/** A text that looks complete to the watcher; the cheap measurement reads only its title and date. */
export function jcamp(title: string, acquired = '2027-01-15T19:00:00Z', more = ''): string {
  return `##TITLE=${title}\n##JCAMP-DX=5.01\n##LONGDATE=${acquired}\n${more}##XYDATA=(X++(Y..Y))\n0 1 2 3\n##END=\n`;
}

export function minutesLater(minutes: number): string {
  return new Date(Date.UTC(2027, 0, 15, 19) + minutes * 60_000).toISOString().replace('.000Z', 'Z');
}

export interface FakeClock extends Clock {
  advance(milliseconds: number): void;
  /** The wall clock alone jumps. */
  jump(milliseconds: number): void;
  readonly sleeps: number[];
}

export function makeClock(onSleep: () => void = () => undefined): FakeClock {
  let wall = startMs;
  let monotonic = 1000;
  const sleeps: number[] = [];
  const advance = (milliseconds: number) => {
    wall += milliseconds;
    monotonic += milliseconds;
  };
  return {
    nowMs: () => wall,
    utcOffsetMin: () => 60,
    monotonicMs: () => monotonic,
    sleep: async (milliseconds) => {
      sleeps.push(milliseconds);
      advance(milliseconds);
      onSleep();
    },
    advance,
    jump: (milliseconds) => {
      wall += milliseconds;
    },
    sleeps,
  };
}

/** Stands in for the measurement: a pure function of bytes and method, refusing what says so in its title. */
export function measureCheaply({ bytes, methodText: method }: MeasureTask): Result<readonly PointRecord[]> {
  const text = Buffer.from(bytes).toString('utf8');
  const title = /##TITLE=(.*)/.exec(text)?.[1] ?? '';
  if (title.includes('corrupt')) {
    return fail({ code: 'jcamp-check-ordinate', area: 'decode', message: 'line 5: a check ordinate differs', retry: 'never' });
  }
  if (title.includes('fault')) throw new TypeError('injected bug');
  const acquired = /##LONGDATE=(.*)/.exec(text)?.[1];
  const record: PointRecord = {
    format: 'kinetrail.point/1',
    program: '0.1.0',
    sha256: sha256(bytes),
    methodSha256: sha256(method),
    title,
    ...(acquired !== undefined ? { acquired } : {}),
    acquiredSource: acquired !== undefined ? 'long-date' : 'none',
    dataSha256: sha256(text.slice(text.indexOf('##XYDATA'))),
    kind: 'fid',
    nucleus: '1H',
    observeMhz: 400,
    status: 'accepted',
    flags: [],
    steps: [],
  };
  return ok([record]);
}

export interface World {
  disk: SimulatedDisk;
  readonly clock: FakeClock;
  readonly events: WatchEvent[];
  readonly program: string;
}

export function makeWorld(files: Readonly<Record<string, string>> = {}, onSleep?: () => void): World {
  const clock = makeClock(onSleep);
  const disk = makeDisk(clock.nowMs);
  disk.write(methodPath, methodText, startMs - 1e7);
  disk.makeFolders(share);
  for (const [name, text] of Object.entries(files)) disk.write(`${share}/${name}`, text, startMs - 1e6);
  return { disk, clock, events: [], program: '0.1.0' };
}

/** A run of `count` time points, ten minutes apart. */
export function nightFiles(count: number, run = 'BX-0417'): Record<string, string> {
  return Object.fromEntries(
    Array.from({ length: count }, (_, index) => [
      `${run}/tp-${String(index).padStart(3, '0')}.jdx`,
      jcamp(`point ${index}`, minutesLater(10 * index), `##DATA=${index}\n`).replace('0 1 2 3', `0 1 2 ${index}`),
    ]),
  );
}

export interface PassOptions {
  readonly port?: FilePort;
  readonly sharePort?: FilePort;
  readonly settings?: Partial<WatchSettings>;
  readonly isHolderAlive?: RecordContext['isHolderAlive'];
  readonly program?: string;
  readonly measure?: typeof measureCheaply | ((task: MeasureTask) => Promise<Result<readonly PointRecord[]>>);
  readonly withReport?: boolean;
  readonly signal?: AbortSignal;
}

export function contextOf(world: World, { port, isHolderAlive, program }: PassOptions = {}): RecordContext {
  return {
    port: port ?? world.disk.port,
    clock: world.clock,
    writer: { host: 'station', user: 'operator', program: program ?? world.program },
    isHolderAlive: isHolderAlive ?? (() => false),
  };
}

export function rendererOf(port: FilePort, withReport = true) {
  return makeRecordRenderer(port, {
    seriesJson: renderSeriesJson,
    seriesCsv: renderSeriesCsv,
    ...(withReport
      ? {
          report: async ({ head, createdUtc, series }) => ({
            html: `<p>${head.seq} ${createdUtc} ${series.points.length}</p>`,
            pdf: Buffer.from(`%PDF ${head.hash}`),
          }),
        }
      : {}),
    index: (cards) => cards.map(({ run }) => run).join('\n'),
  });
}

export async function open(world: World, options: PassOptions = {}): Promise<Result<OpenWatch>> {
  const context = contextOf(world, options);
  const settings: WatchSettings & { outputFolder: string } = {
    share,
    outputFolder: out,
    settleMs: 2000,
    isOnce: true,
    pollMs: 20_000,
    longestWaitMs: 0,
    methodPath,
    ...(options.settings as object),
  };
  return openWatch({
    context,
    settings,
    reader: makeShareReader(options.sharePort ?? world.disk.port, share),
    measurer: makeMeasurer(options.measure ?? measureCheaply),
    renderer: rendererOf(context.port, options.withReport),
    onEvent: (event) => void world.events.push(event),
    ...(options.signal !== undefined ? { signal: options.signal } : {}),
  });
}

/** A single pass, from opening to closing, as `watch --once` makes it. */
export async function pass(world: World, options: PassOptions = {}): Promise<Result<OnceSummary>> {
  const opened = await open(world, options);
  if (!opened.ok) return opened;
  try {
    return await watchOnce(opened.value.session);
  } finally {
    await opened.value.close();
  }
}

export async function verify(
  world: World,
  run = 'BX-0417',
  more: { head?: string; share?: string; program?: string; measure?: typeof measureCheaply } = {},
): Promise<Verification> {
  const { port } = world.disk;
  const { measure, ...rest } = more;
  return verifyRun({
    port,
    folder: `${out}/${run}`,
    measurer: makeMeasurer(measure ?? measureCheaply),
    renderer: rendererOf(port),
    program: world.program,
    ...rest,
  });
}

export function failures(verification: Verification): string[] {
  return verification.checks.filter(({ state }) => state === 'fail').map(({ message }) => message);
}

/** What must not depend on the night's accidents: the derived numbers and every stored object. */
export function lasting(disk: SimulatedDisk, run = 'BX-0417'): Record<string, string> {
  const kept: Record<string, string> = {};
  for (const [path, bytes] of disk.files(`${out}/${run}`)) {
    if (/series\.(json|csv)$|\/(raw|points)\/[0-9a-f]/.test(path)) kept[path] = sha256(bytes);
  }
  return kept;
}

export function ledgerOf(world: World, run = 'BX-0417'): Record<string, unknown>[] {
  const bytes = world.disk.files().get(`${out}/${run}/ledger.jsonl`) ?? Buffer.alloc(0);
  return bytes
    .toString('utf8')
    .split('\n')
    .slice(0, -1)
    .map((line) => JSON.parse(line.slice(0, line.lastIndexOf('\t'))) as Record<string, unknown>);
}
