import type { Flag } from '../base/flag.js';
import { limits } from '../base/limits.js';
import type { Problem } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import { isCompleteJcamp } from '../decode/isCompleteJcamp.js';
import { isUtf8Name, nameText } from '../record/bytePath.js';
import type { FileStat } from '../record/filePort.js';
import type { InputEntry } from '../record/ledgerEntry.js';
import type { RunListing, SpectrumName } from './shareListing.js';
import type { StableRead } from './shareReader.js';
import type { WatchSession } from './watchTypes.js';

/** What looking at a quiet file led to. */
export type Examined =
  | { readonly kind: 'complete'; readonly entry: EntryBase; readonly bytes: Uint8Array; readonly sha256: string }
  /** Nothing to measure: the entry says why. */
  | { readonly kind: 'refused'; readonly entry: InputEntry }
  | { readonly kind: 'waiting'; readonly why: string; readonly isChanging: boolean };

const changing = 'it is still being written';

export type EntryBase = Omit<InputEntry, 'state'>;

/**
 * Reads a file that has been quiet and tells what it is: complete, refused for good or for now, or still being written.
 *
 * @param canWait an unfinished file may be looked at again later; otherwise it is set down as incomplete
 */
export async function examineFile(
  session: WatchSession,
  listing: RunListing,
  spectrum: SpectrumName,
  canWait: boolean,
): Promise<Examined> {
  const base = entryBase(spectrum.name, spectrum.stat);
  const refusal = refusalByStat(spectrum.stat);
  if (refusal !== undefined) return refused(base, refusal.code, refusal.message);
  const read = await session.reader.read([...listing.names, spectrum.name]);
  if (!read.ok) return onFailedRead(base, read.problem, canWait);
  if (hasMoved(spectrum.stat, read.value)) {
    return canWait
      ? { kind: 'waiting', why: changing, isChanging: true }
      : incomplete(base, read.value, 'still-changing', changing);
  }
  if (!isCompleteJcamp(read.value.bytes)) {
    const why = read.value.bytes.length === 0 ? 'it is empty' : 'the end (##END=) is missing: half written or cut off';
    return canWait ? { kind: 'waiting', why, isChanging: false } : incomplete(base, read.value, 'incomplete', why);
  }
  const hash = sha256(read.value.bytes);
  return {
    kind: 'complete',
    entry: { ...entryBase(spectrum.name, read.value.stat), sha256: hash },
    bytes: read.value.bytes,
    sha256: hash,
  };
}

function entryBase(name: Buffer, stat: FileStat): EntryBase {
  return {
    kind: 'input',
    file: nameText(name),
    ...(isUtf8Name(name) ? {} : { fileBase64: name.toString('base64') }),
    sizeBytes: stat.sizeBytes,
    modifiedNs: String(stat.modifiedNs),
    inode: String(stat.inode),
  };
}

function refusalByStat(stat: FileStat): { code: string; message: string } | undefined {
  if (stat.kind === 'link') return { code: 'file-kind', message: 'skipped: a link, which is not followed' };
  if (stat.kind !== 'file') return { code: 'file-kind', message: 'skipped: not a regular file' };
  if (stat.sizeBytes > limits.fileSizeBytesMax) {
    return { code: 'file-too-large', message: `${stat.sizeBytes} bytes; at most ${limits.fileSizeBytesMax} are read` };
  }
  return undefined;
}

function onFailedRead(base: EntryBase, problem: Problem, canWait: boolean): Examined {
  switch (problem.code) {
    case 'file-vanished':
      return {
        kind: 'refused',
        entry: { ...base, state: 'vanished', flags: [{ code: 'vanished', message: 'it was gone before it could be captured' }] },
      };
    case 'file-changing':
      if (canWait) return { kind: 'waiting', why: problem.message, isChanging: true };
      return {
        kind: 'refused',
        entry: { ...base, state: 'incomplete', flags: [{ code: 'still-changing', message: problem.message }] },
      };
    default:
      return refused(base, problem.code, problem.message);
  }
}

function refused(base: EntryBase, code: string, message: string): Examined {
  const flag: Flag = { code, message, weight: 'set-aside' };
  return { kind: 'refused', entry: { ...base, state: 'set-aside', flags: [flag] } };
}

function incomplete(base: EntryBase, read: StableRead, code: string, message: string): Examined {
  return { kind: 'refused', entry: { ...base, state: 'incomplete', sha256: sha256(read.bytes), flags: [{ code, message }] } };
}

function hasMoved(listed: FileStat, { stat }: StableRead): boolean {
  return listed.sizeBytes !== stat.sizeBytes || listed.modifiedNs !== stat.modifiedNs || listed.inode !== stat.inode;
}

/** The entry of a file that did not come to rest in a single pass. */
export function stillChanging({ name, stat }: SpectrumName): InputEntry {
  return { ...entryBase(name, stat), state: 'incomplete', flags: [{ code: 'still-changing', message: changing }] };
}
