import { ok, type Result } from '../base/result.js';
import { joinPath, pathText } from './bytePath.js';
import { makeFolders, readWhole, removeTemporaries } from './durable.js';
import type { FilePort, Path } from './filePort.js';
import { type Ledger, ledgerName, openLedger } from './ledger.js';
import type { EntryBody } from './ledgerEntry.js';
import type { LedgerLine } from './ledgerLine.js';
import { pointsFolder, rawFolder } from './objectStore.js';
import { lockOptions, type RecordContext } from './recordContext.js';
import { type RecordLock, takeLock } from './recordLock.js';
import { outputProblem, systemCode } from './recordProblem.js';

/** A run's record, held by this process: the only form in which anything is written to it. */
export interface HeldRecord {
  readonly folder: Path;
  lines(): readonly LedgerLine[];
  /** Appends and syncs. When the disk failed, the ledger is opened again, checked, and the append tried once more. */
  append(body: EntryBody): Promise<Result<LedgerLine>>;
  release(): Promise<void>;
}

export interface HoldOptions {
  readonly context: RecordContext;
  readonly outputFolder: Path;
  /** Names of the folders from the output folder down to the run's; empty for a run at the root. */
  readonly names: readonly Path[];
  readonly run: string;
  /** Objects without a ledger are taken on: recorded by the caller. */
  readonly adoptsObjects?: boolean;
}

/**
 * Takes the record of a run for writing: makes its folders, locks it, clears what an interrupted write left, opens the ledger
 * and recovers its tail.
 *
 * @errors record-held and the errors of `openLedger`
 */
export async function holdRecord(options: HoldOptions): Promise<Result<HeldRecord>> {
  const { context, outputFolder, names } = options;
  const { port } = context;
  let folder: Path;
  try {
    folder = await makeFolders(port, outputFolder, names);
    await makeFolders(port, folder, [rawFolder]);
    await makeFolders(port, folder, [pointsFolder]);
  } catch (cause) {
    return { ok: false, problem: outputProblem(cause, pathText(joinPath(outputFolder, ...names))) };
  }
  const lock = await takeLock(lockOptions(context, folder));
  if (!lock.ok) return lock;
  const opened = await openLocked(options, folder, lock.value);
  if (!opened.ok) {
    await releaseQuietly(lock.value);
    return opened;
  }
  return ok(makeHeld(options, folder, opened.value, lock.value));
}

function makeHeld(options: HoldOptions, folder: Path, opened: Ledger, lock: RecordLock): HeldRecord {
  let ledger = opened;
  const append = async (body: EntryBody): Promise<Result<LedgerLine>> => {
    const first = await ledger.append(body);
    if (first.ok || (first.problem.code !== 'output-failed' && first.problem.code !== 'disk-full')) return first;
    // Never again on the same descriptor: what a failed sync left in memory may look written and be lost.
    const acknowledgedBytes = ledger.acknowledgedBytes();
    const reopened = await openLedger(options.context, folder, { run: options.run, isFresh: false, acknowledgedBytes });
    if (!reopened.ok) return first.problem.code === 'disk-full' ? first : reopened;
    ledger = reopened.value;
    return ledger.append(body);
  };
  return {
    folder,
    lines: () => ledger.lines(),
    append,
    release: async () => {
      await ledger.close().catch(() => undefined);
      await releaseQuietly(lock);
    },
  };
}

/** A lock that cannot be removed is found stale at the next start: nothing is lost by leaving it. */
async function releaseQuietly(lock: RecordLock): Promise<void> {
  await lock.release().catch((cause: unknown) => {
    if (systemCode(cause) === undefined) throw cause;
  });
}

async function openLocked(options: HoldOptions, folder: Path, lock: RecordLock): Promise<Result<Ledger>> {
  const { context, run, adoptsObjects } = options;
  let isFresh: boolean;
  try {
    for (const name of [[], [rawFolder], [pointsFolder]]) await removeTemporaries(context.port, joinPath(folder, ...name));
    isFresh = adoptsObjects === true || !(await hasObjects(context.port, folder));
  } catch (cause) {
    return { ok: false, problem: outputProblem(cause, pathText(folder)) };
  }
  const ledger = await openLedger(context, folder, { run, isFresh });
  if (!ledger.ok || lock.takenOverFrom === undefined) return ledger;
  const { pid, host, since } = lock.takenOverFrom;
  const message = `process ${pid} on ${host}, which held this record since ${since}, had ended without releasing it`;
  const noted = await ledger.value.append({ kind: 'exception', name: 'takeover', message, sinceUtc: since });
  return noted.ok ? ledger : noted;
}

/** Whether anything is stored although no ledger may be there. */
export async function hasObjects(port: FilePort, folder: Path): Promise<boolean> {
  for (const name of [rawFolder, pointsFolder]) {
    if ((await port.readFolder(joinPath(folder, name))).length > 0) return true;
  }
  return false;
}

/** The bytes of a run's ledger, for reading only; `undefined` when there is none. */
export function readLedgerBytes(port: FilePort, folder: Path): Promise<Buffer | undefined> {
  return readWhole(port, joinPath(folder, ledgerName));
}
