import { convert } from 'jcampconverter';
import { ok, type Result } from '../base/result.js';
import type { CheckedTable } from './checkOrdinates.js';
import { refuse } from './jcampProblem.js';
import type { TableState } from './tableState.js';

/** One table as walked here, with its scaled values. */
export interface WalkedTable {
  readonly state: TableState;
  readonly table: CheckedTable;
  /** First byte of the first table line. */
  readonly start: number;
}

/**
 * Lets the general decoder (jcampconverter) read the same tables, and demands the same numbers.
 *
 * It is handed plain records written here (it reads labels with leading blanks, decimal commas and comments wrongly) around the
 * untouched lines of the tables. Whole ordinates must be equal to the last bit; decimal ones within 1e-9 of the largest.
 *
 * @errors jcamp-decoders-disagree
 */
export function compareDecoders(tables: readonly WalkedTable[]): Result<undefined> {
  const decoded = decodeElsewhere(tables);
  for (const [index, { state, table }] of tables.entries()) {
    const theirs = decoded[index] ?? [];
    const largest = Math.max(Math.abs(table.min), Math.abs(table.max));
    const slack = state.hasFraction ? 1e-9 * largest : 0;
    const { line } = table.plan.record;
    if (theirs.length !== table.values.length)
      return refuse(
        'jcamp-decoders-disagree',
        `one decoder reads ${table.values.length} points at line ${line}, another ${theirs.length}`,
        { line },
      );
    for (let k = 0; k < theirs.length; k += 1) {
      if (Math.abs(theirs[k]! - table.values[k]!) <= slack) continue;
      const numbers = `${table.values[k]} and ${theirs[k]}`;
      return refuse('jcamp-decoders-disagree', `two decoders read point ${k + 1} of the table at line ${line} as ${numbers}`, {
        line,
      });
    }
  }
  return ok(undefined);
}

function decodeElsewhere(tables: readonly WalkedTable[]): (readonly number[])[] {
  const blocks = tables.map(({ state, table, start }) => {
    const { factor } = table.plan;
    const lines = plainLines(state, start);
    return `##NPOINTS=${state.count}\n##FIRSTX=0\n##LASTX=${state.count - 1}\n##XFACTOR=1\n##YFACTOR=${factor.value}\n##XYDATA=(X++(Y..Y))\n${lines}\n`;
  });
  try {
    const { flatten } = convert(`##TITLE=table\n##DATA TYPE=NMR SPECTRUM\n${blocks.join('')}##END=\n`);
    return (flatten[0]?.spectra ?? []).map(({ data }) => data.y ?? []);
  } catch {
    return [];
  }
}

/** The lines of the table as they stand, with comments cut out and powers of ten written out. */
function plainLines(state: TableState, start: number): string {
  const text = (from: number, to: number) =>
    Buffer.from(state.bytes.buffer, state.bytes.byteOffset + from, to - from).toString('latin1');
  const pieces: string[] = [];
  let from = start;
  for (const edit of state.edits) {
    pieces.push(text(from, edit.start), edit.text);
    from = edit.end;
  }
  return `${pieces.join('')}${text(from, state.end)}`;
}
