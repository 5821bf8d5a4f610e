import { ok, type Result } from '../base/result.js';
import { type Header, headerNumber, headerText } from './headerOf.js';
import { refuse, shown } from './jcampProblem.js';
import type { AbscissaPlan, Layout, TablePlan } from './layout.js';
import { numberList, wordList } from './ntuplesLists.js';
import type { HeaderNumber } from './parseNumber.js';
import { firstLineOf } from './recordText.js';
import { unitOf } from './unitOf.js';
import type { JcampRecord } from './walkRecords.js';
import { checkedCount } from './xyDataLayout.js';

type Entries = Map<string, (HeaderNumber | undefined)[]>;

const lists = ['VARDIM', 'FACTOR', 'FIRST', 'LAST', 'MIN', 'MAX'] as const;
const tableForm = /^\((\w+)\+\+\((\w+)\.\.(\w+)\)\)$/;

/**
 * Finds the numbers of an NTUPLES block: a real page, and an imaginary one when the block names one.
 *
 * @errors jcamp-pages, jcamp-list-length, jcamp-table-form, jcamp-record-missing, jcamp-number, jcamp-units, jcamp-too-many-points
 * @source JCAMP-DX 5.00, NTUPLES for NMR FID and NMR SPECTRUM
 */
export function ntuplesLayout(header: Header, tables: readonly JcampRecord[], kind: 'fid' | 'spectrum'): Result<Layout> {
  const symbols = wordList(header, 'SYMBOL').map((word) => word.toUpperCase());
  if (symbols.length < 2)
    return refuse('jcamp-record-missing', '##SYMBOL= is missing or names fewer than two variables', { label: 'SYMBOL' });
  const needed = symbols.filter((_, index) => !isPage(header, index)).length;
  const entries: Entries = new Map();
  for (const label of lists) {
    const list = numberList(header, label, symbols.length, needed);
    if (!list.ok) return list;
    if (list.value) entries.set(label, list.value);
  }
  const plans: TablePlan[] = [];
  let abscissaIndex = -1;
  for (const record of tables) {
    const variables = variablesOf(header, record, symbols);
    if (!variables.ok) return variables;
    const plan = tableOf(header, record, variables.value.ordinate, entries);
    if (!plan.ok) return plan;
    plans.push(plan.value);
    abscissaIndex = variables.value.abscissa;
  }
  const pages = checkPages(plans, needed - 1);
  if (!pages.ok) return pages;
  const abscissa = abscissaOf(header, abscissaIndex, entries, kind);
  return abscissa.ok ? ok({ abscissa: abscissa.value, tables: pages.value }) : abscissa;
}

function isPage(header: Header, index: number): boolean {
  const type = wordList(header, 'VARTYPE')[index] ?? '';
  return type.toUpperCase() === 'PAGE' || (type === '' && wordList(header, 'SYMBOL')[index]?.toUpperCase() === 'N');
}

function variablesOf(
  header: Header,
  record: JcampRecord,
  symbols: readonly string[],
): Result<{ abscissa: number; ordinate: number }> {
  const text = firstLineOf(header.bytes, record).text;
  const form = text
    .slice(0, text.indexOf('))') + 2)
    .replace(/\s/g, '')
    .toUpperCase();
  const match = tableForm.exec(form);
  const where = { line: record.line, label: record.writtenLabel };
  if (!match || match[2] !== match[3])
    return refuse(
      'jcamp-table-form',
      `the table at line ${record.line} has the form "${shown(text)}"; expected (X++(R..R)), XYDATA`,
      where,
    );
  const [abscissa, ordinate] = [symbols.indexOf(match[1]!), symbols.indexOf(match[2]!)];
  if (abscissa < 0 || ordinate < 0 || abscissa === ordinate)
    return refuse(
      'jcamp-pages',
      `the table at line ${record.line} names variables that ##SYMBOL= does not: ${shown(text)}`,
      where,
    );
  return ok({ abscissa, ordinate });
}

function tableOf(header: Header, record: JcampRecord, index: number, entries: Entries): Result<TablePlan> {
  const count = entries.get('VARDIM')?.[index];
  if (!count) return refuse('jcamp-record-missing', '##VAR_DIM= does not state the number of points', { label: 'VAR_DIM' });
  const points = checkedCount(count, 'VAR_DIM');
  if (!points.ok) return points;
  const factor = entries.get('FACTOR')?.[index];
  if (!factor) return refuse('jcamp-record-missing', '##FACTOR= does not scale the ordinates', { label: 'FACTOR' });
  const bounds: { first?: HeaderNumber; last?: HeaderNumber; min?: HeaderNumber; max?: HeaderNumber } = {};
  for (const [key, label] of [
    ['first', 'FIRST'],
    ['last', 'LAST'],
    ['min', 'MIN'],
    ['max', 'MAX'],
  ] as const) {
    const number = entries.get(label)?.[index];
    if (number) bounds[key] = number;
  }
  return ok({ role: roleOf(header, index), record, pointsStated: points.value, factor, ...bounds });
}

function roleOf(header: Header, index: number): 'real' | 'imag' {
  const name = (wordList(header, 'VARNAME')[index] ?? '').toUpperCase();
  if (name.includes('IMAG')) return 'imag';
  if (name.includes('REAL')) return 'real';
  return wordList(header, 'SYMBOL')[index]?.toUpperCase() === 'I' ? 'imag' : 'real';
}

/** Exactly the pages that the block names: one real, at most one imaginary. */
function checkPages(plans: readonly TablePlan[], channelsNamed: number): Result<TablePlan[]> {
  const real = plans.filter(({ role }) => role === 'real');
  const imag = plans.filter(({ role }) => role === 'imag');
  const found = `${real.length} real and ${imag.length} imaginary pages`;
  if (real.length !== 1 || imag.length > 1) return refuse('jcamp-pages', `found ${found}; expected one of each, or one real`);
  if (plans.length !== channelsNamed) return refuse('jcamp-pages', `found ${found}; ##SYMBOL= names ${channelsNamed} channels`);
  if (imag[0] && imag[0].pointsStated !== real[0]!.pointsStated)
    return refuse('jcamp-pages', `the real page has ${real[0]!.pointsStated} points, the imaginary one ${imag[0].pointsStated}`);
  return ok([...real, ...imag]);
}

function abscissaOf(header: Header, index: number, entries: Entries, kind: 'fid' | 'spectrum'): Result<AbscissaPlan> {
  const unit = unitOf(wordList(header, 'UNITS')[index], kind, 'UNITS');
  if (!unit.ok) return unit;
  const [first, last, factor] = (['FIRST', 'LAST', 'FACTOR'] as const).map((label) => entries.get(label)?.[index]);
  if (!first || !last || !factor) {
    const label = !first ? 'FIRST' : !last ? 'LAST' : 'FACTOR';
    return refuse('jcamp-record-missing', `##${label}= does not state the abscissa`, { label });
  }
  const delta = headerText(header, 'DELTAX') === undefined ? ok(undefined) : headerNumber(header, 'DELTAX');
  if (!delta.ok) return delta;
  const [min, max] = (['MIN', 'MAX'] as const).map((label) => entries.get(label)?.[index]);
  const optional = { ...(delta.value ? { delta: delta.value } : {}), ...(min ? { min } : {}), ...(max ? { max } : {}) };
  return ok({ ...unit.value, first, last, factor, ...optional });
}
