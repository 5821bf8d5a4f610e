import type { Flag } from '../base/flag.js';
import { ok, type Result } from '../base/result.js';
import { checkCount } from './checkCount.js';
import { checkOrdinates, extremesOf } from './checkOrdinates.js';
import { compareDecoders, type WalkedTable } from './compareDecoders.js';
import { refuse, tolerated } from './jcampProblem.js';
import type { AbscissaPlan, Layout, TablePlan } from './layout.js';
import { firstLineOf } from './recordText.js';
import { type SettledAxis, settleAxis } from './settleAxis.js';
import { walkTable } from './walkTable.js';

/** Checked numbers of a block. */
export interface Tables {
  readonly real: Float64Array;
  readonly imag?: Float64Array;
  /** The abscissa that the table bears out. */
  readonly abscissa: AbscissaPlan;
  readonly flags: readonly Flag[];
}

/**
 * Reads the tables of a block: walks them, holds them against everything that the header states, and against a second decoder.
 *
 * @errors every table code of `jcampCodes`
 */
export function readTables(bytes: Uint8Array, layout: Layout): Result<Tables> {
  const flags: Flag[] = [];
  const walked: (WalkedTable & SettledAxis)[] = [];
  for (const plan of layout.tables) {
    const one = readTable(bytes, layout, plan);
    if (!one.ok) return one;
    walked.push(one.value);
    flags.push(...one.value.flags);
  }
  const [real, imag] = walked.map(({ table }) => table.values);
  if (imag && imag.length !== real!.length)
    return refuse('jcamp-pages', `the real page has ${real!.length} points, the imaginary one ${imag.length}`);
  const ordinates = checkOrdinates(walked.map(({ table }) => table));
  if (!ordinates.ok) return ordinates;
  const agreed = compareDecoders(walked);
  if (!agreed.ok) return agreed;
  const { abscissa } = walked[0]!;
  return ok({ real: real!, ...(imag ? { imag } : {}), abscissa, flags: distinct([...flags, ...ordinates.value]) });
}

function readTable(bytes: Uint8Array, layout: Layout, plan: TablePlan): Result<WalkedTable & SettledAxis> {
  const { record, pointsStated, factor } = plan;
  const { next: start } = firstLineOf(bytes, record);
  const walk = walkTable(bytes, { start, end: record.end, firstLine: record.line + 1 }, pointsStated);
  if (!walk.ok) return walk;
  const state = walk.value;
  if (state.count < 2)
    return refuse('jcamp-too-few-points', `the table at line ${record.line} holds ${state.count} points`, { line: record.line });
  const count = checkCount(state, plan, layout.abscissa);
  if (!count.ok) return count;
  const axis = settleAxis(state, layout.abscissa);
  if (!axis.ok) return axis;
  const flags = [...count.value, ...axis.value.flags];
  if (state.endsInDifference)
    flags.push(tolerated('jcamp-final-check-missing', `the table at line ${record.line} ends without its last check ordinate`));
  const values = state.ordinates.slice(0, state.count);
  for (let k = 0; k < values.length; k += 1) values[k] = values[k]! * factor.value;
  const table = extremesOf(plan, values);
  return table.ok ? ok({ state, table: table.value, start, abscissa: axis.value.abscissa, flags }) : table;
}

/** Both pages share an axis: what is said of it is said once. */
function distinct(flags: readonly Flag[]): Flag[] {
  return flags.filter((flag, index) => flags.findIndex(({ message }) => message === flag.message) === index);
}
