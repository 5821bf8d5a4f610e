import type { Flag } from '../base/flag.js';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import type { InputEntry } from '../record/ledgerEntry.js';
import type { MeasureOutcome, MeasureTask } from '../record/measurer.js';
import { putPoint, putRaw } from '../record/objectStore.js';
import type { HeldRecord } from '../record/runRecord.js';
import { foldLedger, type RunState, resultKey } from '../record/runState.js';
import type { MethodSource } from './chooseMethod.js';
import type { EntryBase } from './examineFile.js';
import type { MeasureDeps } from './watchTypes.js';

/** A file that is captured and has its measurement under way. */
export interface Underway {
  readonly entry: EntryBase;
  readonly sha256: string;
  readonly task: MeasureTask;
  readonly isAgain: boolean;
  readonly outcome: Promise<MeasureOutcome>;
}

const deathsMax = 2;

/**
 * Captures a file: its bytes are stored and synced before anything is concluded from them; measuring begins.
 *
 * @errors those of the object store
 */
export async function capture(
  session: MeasureDeps,
  held: HeldRecord,
  entry: EntryBase,
  bytes: Uint8Array,
  method: MethodSource,
  isAgain = false,
): Promise<Result<Underway>> {
  const stored = await putRaw(session.context.port, held.folder, bytes);
  if (!stored.ok) return stored;
  const task: MeasureTask = { bytes, fileName: entry.file, methodText: method.text, methodFile: method.file };
  return ok({ entry, sha256: stored.value, task, isAgain, outcome: session.measurer.measure(task) });
}

/**
 * Commits a measured file: point records are stored, then one line of the ledger is appended and synced. That line is the
 * point of no return; everything before it can be done again, everything after it can be rebuilt.
 *
 * @errors those of the object store and of `append`
 */
export async function commit(
  session: MeasureDeps,
  held: HeldRecord,
  underway: Underway,
  method: MethodSource,
): Promise<Result<InputEntry>> {
  const outcome = await outcomeOf(session, held, underway);
  if (!outcome.ok) return outcome;
  const common = {
    ...underway.entry,
    sha256: underway.sha256,
    methodSha256: method.method.sha256,
    engine: session.context.writer.program,
    ...(underway.isAgain ? { again: true as const } : {}),
  };
  if (outcome.value.kind !== 'measured')
    return appendInput(held, { ...common, state: 'set-aside', flags: [flagOf(outcome.value)] });
  const points: string[] = [];
  for (const record of outcome.value.records) {
    const stored = await putPoint(session.context.port, held.folder, record);
    if (!stored.ok) return stored;
    points.push(stored.value);
  }
  return appendInput(held, { ...common, state: 'measured', points });
}

export async function appendInput(held: HeldRecord, entry: InputEntry): Promise<Result<InputEntry>> {
  const line = await held.append(entry);
  return line.ok ? ok(entry) : line;
}

/** A file whose measuring killed its process is tried once more, with a note in the record; then it is set aside. */
async function outcomeOf(
  session: MeasureDeps,
  held: HeldRecord,
  { outcome, sha256, task, entry }: Underway,
): Promise<Result<MeasureOutcome>> {
  let last = await outcome;
  while (last.kind === 'died' && !session.signal?.aborted) {
    const noted = await held.append({
      kind: 'exception',
      name: 'measuring-died',
      message: last.message,
      file: entry.file,
      sha256,
    });
    if (!noted.ok) return noted;
    if (deathsOf(held, sha256) >= deathsMax) return ok(last);
    last = await session.measurer.measure(task);
  }
  return last.kind === 'died' ? fail(stopped) : ok(last);
}

const stopped: Problem = { code: 'watch-stopped', area: 'watch', message: 'the watch was stopped', retry: 'later' };

function deathsOf(held: HeldRecord, sha256: string): number {
  return foldLedger(held.lines()).deaths.get(sha256) ?? 0;
}

function flagOf(outcome: Exclude<MeasureOutcome, { kind: 'measured' }>): Flag {
  switch (outcome.kind) {
    case 'refused':
      return { code: outcome.problem.code, message: outcome.problem.message, weight: 'set-aside' };
    case 'fault':
      return { code: 'program-fault', message: `a fault in the program: ${outcome.message}`, weight: 'set-aside' };
    case 'died':
      return { code: 'measuring-died', message: `measuring it failed twice: ${outcome.message}`, weight: 'set-aside' };
  }
}

/**
 * The entry of a file whose content already has a result under this method: nothing is measured again.
 *
 * @returns `undefined` when there is no such result
 */
export function adopt(
  results: RunState['results'],
  entry: EntryBase,
  sha256: string,
  method: MethodSource,
  program: string,
): InputEntry | undefined {
  const result = results.get(resultKey(sha256, method.method.sha256));
  if (result === undefined) return undefined;
  const hasFault = (result.flags ?? []).some(({ code }) => code === 'program-fault' || code === 'measuring-died');
  if (hasFault && result.engine !== program) return undefined;
  const { state: fate, points, flags, engine, methodSha256 } = result;
  return {
    ...entry,
    sha256,
    state: fate,
    ...(methodSha256 !== undefined ? { methodSha256 } : {}),
    ...(engine !== undefined ? { engine } : {}),
    ...(points !== undefined ? { points } : {}),
    ...(flags !== undefined ? { flags } : {}),
  };
}
