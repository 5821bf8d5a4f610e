import { fail, ok, type Result } from '../base/result.js';
import { joinPath, pathText } from '../record/bytePath.js';
import type { FileStat, Path } from '../record/filePort.js';
import { ledgerName } from '../record/ledger.js';
import type { LedgerLine } from '../record/ledgerLine.js';
import { parseLedger } from '../record/ledgerLine.js';
import type { RecordContext } from '../record/recordContext.js';
import { outputProblem, systemCode } from '../record/recordProblem.js';
import { readLedgerBytes } from '../record/runRecord.js';
import { foldLedger, type RunState } from '../record/runState.js';
import { readStatCache, type StatCache } from './statCache.js';

/** What the watcher remembers of a run between passes; the ledger is the truth, this is its reflection. */
export interface RunMemory {
  readonly lines: readonly LedgerLine[];
  readonly state: RunState;
  /** The ledger's size and identity when it was read; absent when the run has no ledger yet. */
  readonly ledger?: { readonly sizeBytes: number; readonly inode: bigint };
  readonly hasTornTail: boolean;
  readonly statCache: StatCache;
}

export const emptyMemory: RunMemory = { lines: [], state: foldLedger([]), hasTornTail: false, statCache: new Map() };

/**
 * The reflection of a run's ledger: as remembered when the file is as it was left, else read again.
 *
 * @errors ledger-damaged, ledger-resaved, output-failed
 */
export async function recallRun(
  context: RecordContext,
  folder: Path,
  remembered: RunMemory | undefined,
): Promise<Result<RunMemory>> {
  const file = pathText(joinPath(folder, ledgerName));
  try {
    const stat = await statLedger(context, folder);
    if (stat === undefined) return ok(emptyMemory);
    const isAsLeft = remembered?.ledger?.sizeBytes === stat.sizeBytes && remembered.ledger.inode === stat.inode;
    if (isAsLeft) return ok(remembered);
    const bytes = await readLedgerBytes(context.port, folder);
    if (bytes === undefined) return ok(emptyMemory);
    const parsed = parseLedger(bytes, file);
    if (!parsed.ok) return parsed;
    const { lines, tornBytes } = parsed.value;
    const statCache = remembered?.statCache ?? (await readStatCache(context.port, folder));
    const ledger = { sizeBytes: bytes.length, inode: stat.inode };
    return ok({ lines, state: foldLedger(lines), ledger, hasTornTail: tornBytes > 0, statCache });
  } catch (cause) {
    return fail(outputProblem(cause, file));
  }
}

/** The reflection after this process wrote: no reading needed. */
export async function reflect(
  context: RecordContext,
  folder: Path,
  lines: readonly LedgerLine[],
  statCache: StatCache,
): Promise<RunMemory> {
  // Without it the ledger is read again in the next pass: nothing else follows.
  const stat = await statLedger(context, folder).catch((cause: unknown) => {
    if (systemCode(cause) === undefined) throw cause;
    return undefined;
  });
  const ledger = stat !== undefined ? { ledger: { sizeBytes: stat.sizeBytes, inode: stat.inode } } : {};
  return { lines: [...lines], state: foldLedger(lines), ...ledger, hasTornTail: false, statCache };
}

async function statLedger(context: RecordContext, folder: Path): Promise<FileStat | undefined> {
  try {
    return await context.port.stat(joinPath(folder, ledgerName));
  } catch (cause) {
    const code = systemCode(cause);
    if (code === 'ENOENT' || code === 'ENOTDIR') return undefined;
    throw cause;
  }
}
