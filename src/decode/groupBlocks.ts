import { limits } from '../base/limits.js';
import { ok, type Problem, type Result } from '../base/result.js';
import { refuse } from './jcampProblem.js';
import { recordText } from './recordText.js';
import type { JcampRecord } from './walkRecords.js';

/** One block: from `##TITLE=` to its `##END=`. */
export interface JcampBlock {
  /** Own records, without those of inner blocks, `##END=` left out. */
  readonly records: JcampRecord[];
  readonly inner: JcampBlock[];
  isLink: boolean;
  /** Set when the block was not closed. */
  problem?: Problem;
}

/**
 * Groups records into blocks; LINK blocks hold others.
 *
 * A block that lacks its `##END=` is marked and closed where the next `##TITLE=` starts, so that the others go on.
 *
 * @returns the outermost blocks in file order
 * @errors jcamp-title-first, jcamp-too-many-blocks, jcamp-link-depth
 * @source JCAMP-DX 4.24, section 6 (compound files)
 */
export function groupBlocks(bytes: Uint8Array, records: readonly JcampRecord[]): Result<readonly JcampBlock[]> {
  const outermost: JcampBlock[] = [];
  const open: JcampBlock[] = [];
  let blockCount = 0;
  for (const record of records) {
    const current = open.at(-1);
    if (record.problem && current) current.problem ??= record.problem;
    if (record.label === 'TITLE') {
      if (current && !current.isLink) closeUnfinished(open, record);
      blockCount += 1;
      if (blockCount > limits.blockCountMax)
        return refuse('jcamp-too-many-blocks', `more than ${limits.blockCountMax} blocks`, { line: record.line });
      if (open.length > limits.linkDepthMax)
        return refuse('jcamp-link-depth', `LINK blocks are nested deeper than ${limits.linkDepthMax}`, { line: record.line });
      const block: JcampBlock = { records: [record], inner: [], isLink: false };
      (open.at(-1)?.inner ?? outermost).push(block);
      open.push(block);
    } else if (record.label === 'END') {
      open.pop();
    } else if (current) {
      current.records.push(record);
      current.isLink ||= record.label === 'BLOCKS' || (record.label === 'DATATYPE' && isLinkType(bytes, record));
    } else if (outermost.length === 0) {
      return refuse('jcamp-title-first', `the first record is ##${record.writtenLabel}=, not ##TITLE=: the start is missing`, {
        line: record.line,
        label: record.writtenLabel,
      });
    }
  }
  markTruncated(open, records);
  return ok(outermost);
}

function isLinkType(bytes: Uint8Array, record: JcampRecord): boolean {
  return recordText(bytes, record).trim().toUpperCase() === 'LINK';
}

function closeUnfinished(open: JcampBlock[], next: JcampRecord): void {
  const block = open.pop()!;
  const message = `the next block starts at line ${next.line} before ##END= of this one: part of it is missing`;
  block.problem ??= problemOf(refuse('jcamp-block-not-closed', message, { line: next.line, label: 'TITLE' }));
}

function markTruncated(open: readonly JcampBlock[], records: readonly JcampRecord[]): void {
  for (const block of [...open].reverse()) {
    if (block.isLink && block.inner.some(({ problem }) => problem)) continue;
    const last = records.at(-1)!;
    const message = `the text ends in ##${last.writtenLabel}= (line ${last.line}) without ##END=: half written or cut off`;
    block.problem ??= problemOf(refuse('jcamp-truncated', message, { line: last.line, label: last.writtenLabel }));
  }
}

function problemOf(result: Result<never>): Problem {
  return (result as { problem: Problem }).problem;
}
