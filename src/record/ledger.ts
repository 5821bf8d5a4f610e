import { fail, invariant, ok, type Result } from '../base/result.js';
import { joinPath, pathText } from './bytePath.js';
import { publishNew, readOpen, writeAll } from './durable.js';
import type { FileStat, OpenFile, Path } from './filePort.js';
import { carriesData, type EntryBody, firstPrev, type LedgerEntry } from './ledgerEntry.js';
import { encodeLine, type LedgerLine, parseLedger } from './ledgerLine.js';
import type { RecordContext } from './recordContext.js';
import { outputProblem, recordProblem } from './recordProblem.js';
import { recoverTail } from './recoverTail.js';

export const ledgerName = 'ledger.jsonl';

export interface Head {
  readonly seq: number;
  readonly hash: string;
}

/** An open ledger that this process may append to while it holds the record. */
export interface Ledger {
  /** Every entry in order. */
  lines(): readonly LedgerLine[];
  /** Size up to which every byte is synced. */
  acknowledgedBytes(): number;
  /** Of the last entry that carries data: what a report prints. */
  dataHead(): Head;
  /** Appends, syncs, and only then acknowledges. After a failure the ledger is closed: open it again. */
  append(body: EntryBody): Promise<Result<LedgerLine>>;
  close(): Promise<void>;
}

export interface OpenOptions {
  readonly run: string;
  /** Nothing is stored yet: the ledger may be created. */
  readonly isFresh: boolean;
  /** Set after a failed append: what lies beyond was never acknowledged, even when it looks complete. */
  readonly acknowledgedBytes?: number;
}

/**
 * Opens the ledger of a run for appending; the caller holds the record's lock.
 *
 * A torn tail is copied aside, cut off and recorded. A missing ledger is created when `isFresh` (no stored objects).
 *
 * @errors ledger-damaged, ledger-resaved, ledger-missing, disk-full, output-not-writable, output-failed
 */
export async function openLedger(context: RecordContext, folder: Path, options: OpenOptions): Promise<Result<Ledger>> {
  const file = pathText(joinPath(folder, ledgerName));
  try {
    return await openOrCreate(context, folder, options, file);
  } catch (cause) {
    return fail(outputProblem(cause, file));
  }
}

async function openOrCreate(context: RecordContext, folder: Path, options: OpenOptions, file: string): Promise<Result<Ledger>> {
  const path = joinPath(folder, ledgerName);
  const opened = await openExisting(context, path);
  if (opened !== undefined) return readForAppend(context, folder, opened, file, options.acknowledgedBytes);
  if (!options.isFresh) {
    const hint =
      'Restore the ledger from a copy, or adopt the stored files: kinetrail amend ... --adopt-objects --by WHO --because WHY.';
    return fail(recordProblem('ledger-missing', 'the ledger is missing while stored files exist', { hint, file }));
  }
  const first = encodeLine(entryOf(context, { kind: 'opened', format: 'kinetrail.ledger/1', run: options.run }, 1, firstPrev));
  await publishNew(context.port, folder, ledgerName, first.bytes);
  const created = await openExisting(context, path);
  invariant(created !== undefined, 'a ledger that was just published is there');
  return readForAppend(context, folder, created, file, undefined);
}

async function openExisting(context: RecordContext, path: Path): Promise<OpenFile | undefined> {
  try {
    return await context.port.open(path, 'append');
  } catch (cause) {
    if ((cause as NodeJS.ErrnoException).code === 'ENOENT') return undefined;
    throw cause;
  }
}

async function readForAppend(
  context: RecordContext,
  folder: Path,
  open: OpenFile,
  file: string,
  acknowledgedBytes: number | undefined,
): Promise<Result<Ledger>> {
  let isKept = false;
  try {
    const bytes = await readOpen(open, (await open.stat()).sizeBytes);
    const parsed = parseLedger(bytes.subarray(0, acknowledgedBytes), file);
    if (!parsed.ok) return parsed;
    if (parsed.value.lines.length === 0) {
      const hint = 'Restore the ledger from a copy.';
      return fail(recordProblem('ledger-damaged', 'the ledger holds no entry', { hint, file, line: 1 }));
    }
    const torn = bytes.subarray(parsed.value.soundBytes);
    const recovered = torn.length > 0 ? await recoverTail(context.port, folder, open, torn, parsed.value.soundBytes) : undefined;
    // The process that wrote the last line may have died before its sync.
    await open.dataSync();
    const ledger = makeLedger(context, open, joinPath(folder, ledgerName), [...parsed.value.lines], await open.stat());
    isKept = true;
    if (recovered === undefined) return ok(ledger);
    const noted = await ledger.append({ kind: 'exception', name: 'recovered', ...recovered });
    return noted.ok ? ok(ledger) : noted;
  } finally {
    if (!isKept) await open.close();
  }
}

function makeLedger(context: RecordContext, open: OpenFile, path: Path, lines: LedgerLine[], at: FileStat): Ledger {
  const file = pathText(path);
  let { sizeBytes } = at;
  let isOpen = true;
  const close = async () => {
    if (!isOpen) return;
    isOpen = false;
    await open.close();
  };
  const write = async (bytes: Buffer): Promise<boolean> => {
    const before = await open.stat();
    if (before.sizeBytes !== sizeBytes) return false;
    await writeAll(open, bytes);
    const after = await open.stat();
    if (after.sizeBytes > sizeBytes + bytes.length) return false;
    if (after.sizeBytes < sizeBytes + bytes.length) throw Object.assign(new Error('a write lost bytes'), { code: 'EIO' });
    await open.dataSync();
    sizeBytes += bytes.length;
    return true;
  };
  const append = async (body: EntryBody): Promise<Result<LedgerLine>> => {
    invariant(isOpen, 'a closed ledger takes no entry');
    const last = lines.at(-1)!;
    const entry = entryOf(context, body, last.entry.seq + 1, last.hash);
    const { bytes, hash } = encodeLine(entry);
    try {
      if ((await isSameFile(context, path, at)) && (await write(bytes))) {
        const line = { entry, hash };
        lines.push(line);
        return ok(line);
      }
    } catch (cause) {
      await close().catch(() => undefined);
      return fail(outputProblem(cause, file));
    }
    await close().catch(() => undefined);
    const hint = 'Another process wrote to this record. This one stops; what it had acknowledged is safe.';
    return fail(recordProblem('ledger-changed', 'the ledger is no longer as this process left it', { hint, file }));
  };
  return { lines: () => lines, acknowledgedBytes: () => sizeBytes, dataHead: () => dataHeadOf(lines), append, close };
}

/** The fence: the name still leads to the file that was opened, and nobody else made it grow. */
async function isSameFile(context: RecordContext, path: Path, at: FileStat): Promise<boolean> {
  try {
    const now = await context.port.stat(path);
    return now.inode === at.inode && now.device === at.device;
  } catch (cause) {
    if ((cause as NodeJS.ErrnoException).code === 'ENOENT') return false;
    throw cause;
  }
}

function entryOf(context: RecordContext, body: EntryBody, seq: number, prev: string): LedgerEntry {
  const { clock, writer } = context;
  return { ...body, ...writer, seq, prev, at: new Date(clock.nowMs()).toISOString(), utcOffsetMin: clock.utcOffsetMin() };
}

/** The last entry that carries data. */
export function dataHeadOf(lines: readonly LedgerLine[]): Head {
  const line = lines.findLast(({ entry }) => carriesData(entry));
  invariant(line !== undefined, 'a ledger starts with an entry that carries data');
  return { seq: line.entry.seq, hash: line.hash };
}
