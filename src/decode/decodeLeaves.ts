import type { Flag } from '../base/flag.js';
import { ok, type Result } from '../base/result.js';
import type { Acquisition } from './acquisition.js';
import { decodeBlock } from './decodeBlock.js';
import type { JcampBlock } from './groupBlocks.js';
import { type Header, headerNumber, headerOf } from './headerOf.js';
import { refuse, tolerated } from './jcampProblem.js';
import { kindOf } from './kindOf.js';

interface Leaf {
  readonly block: JcampBlock;
  readonly content: Result<{ header: Header; kind: 'fid' | 'spectrum' | 'passed-over' }>;
}

/**
 * Decodes every block that holds a spectrum; blocks of peaks or structures are passed over with a note.
 *
 * @param flags what was tolerated in the file as a whole; every acquisition carries it
 * @returns one result for each FID or spectrum block, in file order
 * @errors jcamp-unsupported when no block holds what is read here
 */
export function decodeLeaves(
  bytes: Uint8Array,
  blocks: readonly JcampBlock[],
  privateRecords: readonly string[],
  flags: readonly Flag[],
): Result<readonly Result<Acquisition>[]> {
  const leaves = blocks.flatMap((block) => leavesOf(block)).map((block) => ({ block, content: contentOf(bytes, block) }));
  const [first] = leaves;
  const wanted = leaves.filter(({ content }) => !(content.ok && content.value.kind === 'passed-over'));
  if (wanted.length === 0) {
    const holds = first ? 'only peak tables, assignments or structures' : 'no block with data';
    return refuse('jcamp-unsupported', `the file holds ${holds}; only one-dimensional NMR FIDs and spectra are read`);
  }
  const problems = wanted.map(({ content }) => (content.ok ? undefined : content.problem));
  if (problems[0] && problems.every((problem) => problem?.code === 'jcamp-unsupported'))
    return { ok: false, problem: problems[0] };

  const passedOver = leaves.length - wanted.length;
  const note = `${passedOver} blocks of peaks, assignments or structures were passed over`;
  const shared = [
    ...flags,
    ...blockCountFlags(bytes, blocks),
    ...(passedOver > 0 ? [tolerated('jcamp-block-passed-over', note)] : []),
  ];
  return ok(
    wanted.map((leaf, index) => {
      const number = wanted.length > 1 ? index + 1 : undefined;
      const decoded = decodeLeaf(leaf, number, privateRecords);
      return decoded.ok && shared.length > 0 ? ok({ ...decoded.value, flags: [...shared, ...decoded.value.flags] }) : decoded;
    }),
  );
}

function decodeLeaf(
  { block, content }: Leaf,
  number: number | undefined,
  privateRecords: readonly string[],
): Result<Acquisition> {
  if (!content.ok) return content;
  const { header, kind } = content.value;
  if (kind === 'passed-over') return refuse('jcamp-unsupported', 'the block holds no spectrum');
  return decodeBlock(header, block.records, kind, number, privateRecords);
}

/** Blocks that hold data; a LINK block counts when it was not closed or holds a table that must have belonged to another block. */
function leavesOf(block: JcampBlock): JcampBlock[] {
  if (!block.isLink) return [block];
  const inner = block.inner.flatMap(leavesOf);
  return block.problem || hasTable(block) ? [...inner, block] : inner;
}

function hasTable({ records }: JcampBlock): boolean {
  return records.some(({ label }) => label === 'XYDATA' || label === 'DATATABLE');
}

function contentOf(bytes: Uint8Array, block: JcampBlock): Leaf['content'] {
  if (block.problem) return { ok: false, problem: block.problem };
  if (block.isLink) {
    const { line } = block.records.find(({ label }) => label === 'XYDATA' || label === 'DATATABLE')!;
    return refuse(
      'jcamp-structure',
      `the table at line ${line} stands in a LINK block: the ##TITLE= line of its block is missing`,
      { line },
    );
  }
  const header = headerOf(bytes, block.records);
  if (!header.ok) return header;
  const kind = kindOf(header.value);
  return kind.ok ? ok({ header: header.value, kind: kind.value }) : kind;
}

/** `##BLOCKS=` counts the inner blocks; some writers count the outer one too. */
function blockCountFlags(bytes: Uint8Array, blocks: readonly JcampBlock[]): Flag[] {
  return blocks.flatMap((block) => {
    if (!block.isLink) return [];
    const header = headerOf(bytes, block.records);
    const stated = header.ok ? headerNumber(header.value, 'BLOCKS') : undefined;
    const value = stated?.ok ? stated.value?.value : undefined;
    const found = block.inner.length;
    if (value === undefined || value === found || value === found + 1) return [];
    return [tolerated('jcamp-block-count', `##BLOCKS= states ${value} blocks; ${found} were found`)];
  });
}
