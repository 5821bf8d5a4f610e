import { limits } from '../base/limits.js';
import { ok, type Result } from '../base/result.js';
import { type Header, headerNumber, headerText, requiredNumber } from './headerOf.js';
import { refuse, shown } from './jcampProblem.js';
import type { AbscissaPlan, Layout, TablePlan } from './layout.js';
import type { HeaderNumber } from './parseNumber.js';
import { firstLineOf } from './recordText.js';
import { unitOf } from './unitOf.js';
import type { JcampRecord } from './walkRecords.js';

/**
 * Finds the numbers of a block with one `##XYDATA=` table.
 *
 * @errors jcamp-pages, jcamp-table-form, jcamp-record-missing, jcamp-number, jcamp-units, jcamp-too-many-points
 * @source JCAMP-DX 4.24, section 5; 5.00 for NMR
 */
export function xyDataLayout(header: Header, tables: readonly JcampRecord[], kind: 'fid' | 'spectrum'): Result<Layout> {
  const [record, second] = tables;
  if (!record) return refuse('jcamp-pages', 'the block holds no ##XYDATA= table');
  if (second)
    return refuse('jcamp-pages', `a second table starts at line ${second.line}; one is expected`, { line: second.line });
  const form = firstLineOf(header.bytes, record).text.replace(/\s/g, '').toUpperCase();
  if (form !== '(X++(Y..Y))')
    return refuse('jcamp-table-form', `the table at line ${record.line} has the form "${shown(form)}"; expected (X++(Y..Y))`, {
      line: record.line,
      label: record.writtenLabel,
    });
  const abscissa = abscissaOf(header, kind);
  if (!abscissa.ok) return abscissa;
  const table = tableOf(header, record);
  return table.ok ? ok({ abscissa: abscissa.value, tables: [table.value] }) : table;
}

function abscissaOf(header: Header, kind: 'fid' | 'spectrum'): Result<AbscissaPlan> {
  const unit = unitOf(headerText(header, 'XUNITS'), kind, 'XUNITS');
  if (!unit.ok) return unit;
  const first = requiredNumber(header, 'FIRSTX');
  if (!first.ok) return first;
  const last = requiredNumber(header, 'LASTX');
  if (!last.ok) return last;
  const factor = requiredNumber(header, 'XFACTOR');
  if (!factor.ok) return factor;
  const delta = headerNumber(header, 'DELTAX');
  if (!delta.ok) return delta;
  const min = headerNumber(header, 'MINX');
  if (!min.ok) return min;
  const max = headerNumber(header, 'MAXX');
  if (!max.ok) return max;
  return ok({
    ...unit.value,
    first: first.value,
    last: last.value,
    factor: factor.value,
    ...(delta.value ? { delta: delta.value } : {}),
    ...(min.value ? { min: min.value } : {}),
    ...(max.value ? { max: max.value } : {}),
  });
}

function tableOf(header: Header, record: JcampRecord): Result<TablePlan> {
  const count = requiredNumber(header, 'NPOINTS');
  if (!count.ok) return count;
  const points = checkedCount(count.value, 'NPOINTS');
  if (!points.ok) return points;
  const factor = requiredNumber(header, 'YFACTOR');
  if (!factor.ok) return factor;
  const bounds: { first?: HeaderNumber; last?: HeaderNumber; min?: HeaderNumber; max?: HeaderNumber } = {};
  for (const [key, label] of [
    ['first', 'FIRSTY'],
    ['last', 'LASTY'],
    ['min', 'MINY'],
    ['max', 'MAXY'],
  ] as const) {
    const number = headerNumber(header, label);
    if (!number.ok) return number;
    if (number.value) bounds[key] = number.value;
  }
  return ok({ role: 'real', record, pointsStated: points.value, factor: factor.value, ...bounds });
}

/** A stated number of points, held to be whole, at least two and within the limit before anything is allocated. */
export function checkedCount(count: HeaderNumber, label: string): Result<number> {
  const { value } = count;
  if (!Number.isInteger(value) || value < 0)
    return refuse('jcamp-number', `##${label}= is ${value}; expected a whole number of points`, { label });
  if (value < 2) return refuse('jcamp-too-few-points', `##${label}= states ${value} points; expected at least two`, { label });
  if (value > limits.pointCountMax)
    return refuse('jcamp-too-many-points', `##${label}= states ${value} points; the limit is ${limits.pointCountMax}`, { label });
  return ok(value);
}
