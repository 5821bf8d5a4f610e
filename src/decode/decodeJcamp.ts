import type { Flag } from '../base/flag.js';
import { limits } from '../base/limits.js';
import { ok, type Problem, type Result } from '../base/result.js';
import type { Acquisition } from './acquisition.js';
import { decodeLeaves } from './decodeLeaves.js';
import { groupBlocks } from './groupBlocks.js';
import { refuse, tolerated } from './jcampProblem.js';
import { byteOf, type JcampRecord, lineEnd, nextLine, skipBlanks, skipByteOrderMark, walkRecords } from './walkRecords.js';

export { isCompleteJcamp } from './isCompleteJcamp.js';

export interface DecodeOptions {
  /** Names of private records (`$...`) that the site asks for; no other private record is read. */
  readonly privateRecords?: readonly string[];
}

/**
 * Decodes a JCAMP-DX file into acquisitions: one result for each FID or spectrum block.
 *
 * How a file is read, each step in its own file:
 *
 * 1. `checkText` (below): limits and binary data, before anything else is looked at.
 * 2. `walkRecords`: one pass over the bytes finds every `##LABEL=`, in any line ending, with or without blanks before it.
 * 3. `groupBlocks`: TITLE ... END, nested by LINK; a block that was not closed is marked, and the others go on.
 * 4. `decodeLeaves`, `kindOf`: FID, spectrum, something to pass over, or something this program does not read.
 * 5. `decodeBlock`, `xyDataLayout` / `ntuplesLayout`: what the header states of the axis and of each table.
 * 6. `readTables`, `walkTable`: decodes AFFN, PAC, SQZ, DIF and DUP and holds every check ordinate; repeat counts are limited first.
 * 7. `checkCount`, `settleAxis` (`checkAbscissa`), `checkOrdinates`: the table against NPOINTS, FIRST, LAST, DELTA, FACTOR, MIN and MAX.
 * 8. `compareDecoders`: jcampconverter reads the same tables; one different number is a refusal.
 * 9. `placeOf`, `factsOf`, `acquiredOf`: dwell time or axis, standard facts, time of acquisition.
 *
 * What is tolerated is said in `flags`; every code with its meaning stands in `codes.ts`.
 *
 * @param bytes    the file as captured
 * @param fileName used in problems only
 * @returns results in file order; `block` counts them from 1 when there is more than one
 * @errors outer: nothing in the file can be read, or all of it is of another kind; inner: one block cannot be read
 * @source JCAMP-DX 4.24 (Appl. Spectrosc. 1988, 42, 151), 5.00 (1993, 47, 1093), 5.01 (Pure Appl. Chem. 1999, 71, 1549)
 */
export function decodeJcamp(
  bytes: Uint8Array,
  fileName: string,
  options: DecodeOptions = {},
): Result<readonly Result<Acquisition>[]> {
  const decoded = decodeFile(bytes, options);
  if (!decoded.ok) return { ok: false, problem: named(decoded.problem, fileName) };
  return ok(decoded.value.map((block) => (block.ok ? block : { ok: false, problem: named(block.problem, fileName) })));
}

function decodeFile(bytes: Uint8Array, options: DecodeOptions): Result<readonly Result<Acquisition>[]> {
  const text = checkText(bytes);
  if (!text.ok) return text;
  const records = walkRecords(bytes);
  if (!records.ok) return records;
  const blocks = groupBlocks(bytes, records.value);
  if (!blocks.ok) return blocks;
  return decodeLeaves(bytes, blocks.value, options.privateRecords ?? [], strayText(bytes, records.value));
}

function named(problem: Problem, fileName: string): Problem {
  return { ...problem, where: { file: fileName, ...problem.where } };
}

function checkText(bytes: Uint8Array): Result<undefined> {
  if (bytes.length === 0) return refuse('jcamp-empty', 'the file is empty');
  if (bytes.length > limits.fileSizeBytesMax)
    return refuse('jcamp-file-too-large', `the file has ${bytes.length} bytes; the limit is ${limits.fileSizeBytesMax}`);
  const zero = bytes.indexOf(0);
  if (zero >= 0)
    return refuse('jcamp-not-text', `the file holds a zero byte at ${zero}: it is binary data or two-byte text, not JCAMP-DX`);
  return ok(undefined);
}

/** Text outside the blocks: comments and blank lines are nothing, anything else is noted. */
function strayText(bytes: Uint8Array, records: readonly JcampRecord[]): Flag[] {
  const flags: Flag[] = [];
  const [first, last] = [records[0]!, records.at(-1)!];
  const firstMark = bytes.indexOf(byteOf.hash);
  if (hasText(bytes, skipByteOrderMark(bytes), firstMark))
    flags.push(tolerated('jcamp-text-before-title', `text before ##TITLE= (line ${first.line}) was passed over`));
  if (last.label === 'END' && hasText(bytes, nextLine(bytes, lineEnd(bytes, last.start)), last.end))
    flags.push(tolerated('jcamp-text-after-end', `text after the last ##END= (line ${last.line}) was passed over`));
  return flags;
}

function hasText(bytes: Uint8Array, start: number, end: number): boolean {
  for (let at = start; at < end; ) {
    const stop = Math.min(lineEnd(bytes, at), end);
    const from = skipBlanks(bytes, at, stop);
    if (from < stop && !(bytes[from] === byteOf.dollar && bytes[from + 1] === byteOf.dollar)) return true;
    at = nextLine(bytes, stop);
  }
  return false;
}
