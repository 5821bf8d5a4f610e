import type { Flag } from '../base/flag.js';
import { ok, type Result } from '../base/result.js';
import type { JcampCodeName } from './codes.js';
import { refuse, tolerated } from './jcampProblem.js';
import type { TablePlan } from './layout.js';
import type { HeaderNumber } from './parseNumber.js';

/** Scaled ordinates of one table with what its header states of them. */
export interface CheckedTable {
  readonly plan: TablePlan;
  readonly values: Float64Array;
  readonly min: number;
  readonly max: number;
}

/** Beyond its rounding a stated ordinate may be off by this part of the largest ordinate, and is noted. */
const slackOfLargest = 1e-4;

/** Finds the extremes of a table. @errors jcamp-not-finite */
export function extremesOf(plan: TablePlan, values: Float64Array): Result<CheckedTable> {
  let [min, max] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (let k = 0; k < values.length; k += 1) {
    const value = values[k]!;
    if (value < min) min = value;
    if (value > max) max = value;
    if (!(value - value === 0))
      return refuse('jcamp-not-finite', `point ${k + 1} of the table at line ${plan.record.line} is too large to be a number`);
  }
  return ok({ plan, values, min, max });
}

/**
 * Holds first and last point and the extremes of every table against FIRST, LAST, MIN and MAX of the header.
 *
 * Tolerated with a note: values off by up to 1e-4 of the largest ordinate (a header computed before rounding), extremes that are both
 * zero (never filled in), and extremes that are those of the other page or of both pages together.
 *
 * @errors jcamp-first-ordinate, jcamp-last-ordinate, jcamp-extreme-ordinate
 * @source JCAMP-DX 4.24, section 5 (FIRSTY, MAXY, MINY); 5.00 (FIRST, LAST, MIN, MAX)
 */
export function checkOrdinates(tables: readonly CheckedTable[]): Result<Flag[]> {
  const flags: Flag[] = [];
  for (const table of tables) {
    const { plan, values, min, max } = table;
    for (const [code, name, stated, found] of [
      ['jcamp-first-ordinate', 'first point', plan.first, values[0]!],
      ['jcamp-last-ordinate', 'last point', plan.last, values.at(-1)!],
    ] as const) {
      const checked = compare(table, code, name, stated, found);
      if (!checked.ok) return checked;
      flags.push(...checked.value);
    }
    if (isForeign(table, tables)) {
      const text = `MIN and MAX of the table at line ${plan.record.line} are empty, or not those of this page; not used`;
      flags.push(tolerated('jcamp-extremes-header', text));
      continue;
    }
    for (const [name, stated, found] of [
      ['smallest ordinate', plan.min, min],
      ['largest ordinate', plan.max, max],
    ] as const) {
      const checked = compare(table, 'jcamp-extreme-ordinate', name, stated, found);
      if (!checked.ok) return checked;
      flags.push(...checked.value);
    }
  }
  return ok(flags);
}

function compare(
  { plan, min, max }: CheckedTable,
  code: JcampCodeName,
  name: string,
  stated: HeaderNumber | undefined,
  found: number,
): Result<Flag[]> {
  if (!stated) return ok([]);
  const off = Math.abs(stated.value - found);
  const relative = plan.factor.rounding / Math.abs(plan.factor.value) + 1e-9;
  if (off <= stated.roundingLoose * 1.001 + relative * Math.abs(found)) return ok([]);
  const largest = Math.max(Math.abs(min), Math.abs(max));
  const { line } = plan.record;
  if (off <= slackOfLargest * largest)
    return ok([
      tolerated('jcamp-ordinate-header', `the ${name} of the table at line ${line} is ${found}; the header says ${stated.value}`),
    ]);
  return refuse(
    code,
    `the ${name} of the table at line ${line} is ${found}; the header says ${stated.value}: one of them is damaged`,
    { line, label: plan.record.writtenLabel },
  );
}

/** Not its own extremes, but never filled in, or those of the other page, or those of all pages together. */
function isForeign({ plan, min, max }: CheckedTable, tables: readonly CheckedTable[]): boolean {
  const { min: low, max: high } = plan;
  if (!low || !high) return false;
  const fits = (lowest: number, highest: number) =>
    Math.abs(low.value - lowest) <= low.roundingLoose * 1.001 && Math.abs(high.value - highest) <= high.roundingLoose * 1.001;
  if (fits(min, max)) return false;
  if (low.value === 0 && high.value === 0) return true;
  const together = fits(Math.min(...tables.map((table) => table.min)), Math.max(...tables.map((table) => table.max)));
  return (together && tables.length > 1) || tables.some((table) => table.plan !== plan && fits(table.min, table.max));
}
