import { ok, type Result } from '../base/result.js';
import { acquiredOf } from './acquiredOf.js';
import type { Acquisition } from './acquisition.js';
import { checkField } from './checkField.js';
import { dataSha256Of } from './dataSha256Of.js';
import { factsOf, nucleusOf, observeMhzOf } from './factsOf.js';
import { type Header, headerText } from './headerOf.js';
import { refuse, tolerated } from './jcampProblem.js';
import type { Layout } from './layout.js';
import { ntuplesLayout } from './ntuplesLayout.js';
import { placeOf } from './placeOf.js';
import { readTables } from './readTables.js';
import type { JcampRecord } from './walkRecords.js';
import { xyDataLayout } from './xyDataLayout.js';

/**
 * Decodes one NMR block into an acquisition.
 *
 * @param header  its records
 * @param records the same in file order: an NTUPLES block has one table a page
 * @param block   1-based number in a compound file; undefined for a single block
 * @errors every refusal of `jcampCodes` that concerns one block
 */
export function decodeBlock(
  header: Header,
  records: readonly JcampRecord[],
  kind: 'fid' | 'spectrum',
  block: number | undefined,
  privateRecords: readonly string[],
): Result<Acquisition> {
  const found = layoutOf(header, records, kind);
  if (!found.ok) return found;
  const layout = found.value;
  const observeMhz = observeMhzOf(header, layout.abscissa.unit);
  if (!observeMhz.ok) return observeMhz;
  const nucleus = nucleusOf(header);
  const tables = readTables(header.bytes, layout);
  if (!tables.ok) return tables;
  const { real, imag, flags } = tables.value;
  const facts = factsOf(header, privateRecords);
  const place = placeOf(tables.value.abscissa, real.length, observeMhz.value, facts.shiftReference, header);
  const time = acquiredOf(header);
  const acquisition: Omit<Acquisition, 'dataSha256'> = {
    kind: kind === 'fid' ? 'fid' : imag ? 'complex-spectrum' : 'real-spectrum',
    title: (headerText(header, 'TITLE') ?? '').replace(/\s*\n\s*/g, ' '),
    ...(block !== undefined ? { block } : {}),
    ...(nucleus !== undefined ? { nucleus } : {}),
    ...(observeMhz.value !== undefined ? { observeMhz: observeMhz.value } : {}),
    real,
    ...(imag ? { imag } : {}),
    ...place,
    ...facts,
    ...time,
    flags: [...header.flags, ...checkField(nucleus, observeMhz.value, facts.fieldT), ...flags],
  };
  return ok({ ...acquisition, dataSha256: dataSha256Of(acquisition) });
}

function layoutOf(header: Header, records: readonly JcampRecord[], kind: 'fid' | 'spectrum'): Result<Layout> {
  const other = records.find(({ label }) => label === 'XYPOINTS' || label === 'PEAKTABLE');
  const plain = records.filter(({ label }) => label === 'XYDATA');
  const pages = records.filter(({ label }) => label === 'DATATABLE');
  if (other && plain.length + pages.length === 0)
    return refuse('jcamp-unsupported', `the block holds ##${other.writtenLabel}=, not equally spaced points`, {
      line: other.line,
      label: other.writtenLabel,
    });
  if (!header.records.has('NTUPLES')) {
    if (pages[0])
      return refuse('jcamp-pages', `a page at line ${pages[0].line}, but no ##NTUPLES= record`, { line: pages[0].line });
    return xyDataLayout(header, plain, kind);
  }
  if (plain[0])
    return refuse('jcamp-pages', `##XYDATA= at line ${plain[0].line} in a block that holds pages`, { line: plain[0].line });
  if (!header.records.has('ENDNTUPLES'))
    header.flags.push(tolerated('jcamp-end-ntuples-missing', '##END NTUPLES= is missing; all pages are complete'));
  return ntuplesLayout(header, pages, kind);
}
