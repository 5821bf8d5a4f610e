import { canonicalJson } from '../base/canonicalJson.js';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import type { LedgerEntry } from './ledgerEntry.js';
import { firstPrev } from './ledgerEntry.js';
import { recordProblem } from './recordProblem.js';

export interface LedgerLine {
  readonly entry: LedgerEntry;
  readonly hash: string;
}

/** The bytes of a line: canonical JSON, tab, SHA-256 of that JSON, newline. */
export function encodeLine(entry: LedgerEntry): { bytes: Buffer; hash: string } {
  const text = canonicalJson(entry);
  const hash = sha256(text);
  return { bytes: Buffer.from(`${text}\t${hash}\n`), hash };
}

export interface ParsedLedger {
  readonly lines: readonly LedgerLine[];
  /** Bytes that belong to complete lines. */
  readonly soundBytes: number;
  /** What follows the last newline: was never acknowledged. */
  readonly tornBytes: number;
}

const newline = 0x0a;

/**
 * Reads a ledger and checks its chain; repairs nothing.
 *
 * @param bytes the whole file
 * @param file  for messages
 * @returns the entries in order; an unterminated tail is reported, not judged
 * @errors  ledger-resaved (an editor changed line ends or added a byte-order mark), ledger-damaged (first bad entry named)
 */
export function parseLedger(bytes: Uint8Array, file: string): Result<ParsedLedger> {
  const view = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.byteLength);
  if (view[0] === 0xef && view[1] === 0xbb && view[2] === 0xbf) return fail(resaved(file, 'starts with a byte-order mark'));
  const lines: LedgerLine[] = [];
  let start = 0;
  let prev = firstPrev;
  while (true) {
    const end = view.indexOf(newline, start);
    if (end < 0) break;
    if (view[end - 1] === 0x0d) return fail(resaved(file, `has changed line ends at line ${lines.length + 1}`));
    const line = parseLine(view.subarray(start, end), lines.length + 1, prev, file);
    if (!line.ok) return line;
    lines.push(line.value);
    prev = line.value.hash;
    start = end + 1;
  }
  return ok({ lines, soundBytes: start, tornBytes: view.length - start });
}

function parseLine(line: Buffer, seq: number, prev: string, file: string): Result<LedgerLine> {
  const tab = line.lastIndexOf(0x09);
  const hash = tab >= 0 ? line.subarray(tab + 1).toString('latin1') : '';
  if (tab < 0 || sha256(line.subarray(0, tab)) !== hash) return fail(damaged(file, seq, 'its hash does not fit its text'));
  const entry = JSON.parse(line.subarray(0, tab).toString('utf8')) as LedgerEntry;
  if (entry.seq !== seq)
    return fail(damaged(file, seq, `it calls itself entry ${entry.seq}: an entry was removed, repeated or moved`));
  if (entry.prev !== prev)
    return fail(damaged(file, seq, 'it does not follow the entry before it: one of the two was exchanged'));
  return ok({ entry, hash });
}

function damaged(file: string, seq: number, why: string): Problem {
  const hint = 'Nothing more is written to this record. Restore it from a copy, or keep it and start a new output folder.';
  return recordProblem('ledger-damaged', `entry ${seq} of the ledger is damaged: ${why}`, { hint, file, line: seq });
}

function resaved(file: string, how: string): Problem {
  const hint = 'It was saved by an editor. Restore the original file; it is not repaired in place.';
  return recordProblem('ledger-resaved', `the ledger ${how}`, { hint, file });
}
