import { ok, type Result } from '../base/result.js';
import { type Header, headerText } from './headerOf.js';
import { refuse, shown } from './jcampProblem.js';
import { plainLabel } from './walkRecords.js';

/** What a block is, by its DATA TYPE. `passed-over`: belongs to NMR but holds no spectrum (peaks, assignments, structures). */
export type BlockKind = 'fid' | 'spectrum' | 'passed-over';

/**
 * Tells what a block holds.
 *
 * @errors jcamp-unsupported (other techniques, more than one dimension), jcamp-record-missing
 */
export function kindOf(header: Header): Result<BlockKind> {
  const text = headerText(header, 'DATATYPE');
  const dataClass = (headerText(header, 'DATACLASS') ?? '').replace(/\s/g, '').toUpperCase();
  if (text === undefined)
    return header.records.has('JCAMPCS')
      ? ok('passed-over')
      : refuse('jcamp-record-missing', '##DATA TYPE= is missing: it cannot be told what the block holds', { label: 'DATA TYPE' });
  const type = plainLabel(text);
  if (type === 'NMRPEAKTABLE' || type === 'NMRPEAKASSIGNMENTS') return ok('passed-over');
  const unsupported = (what: string) =>
    refuse('jcamp-unsupported', `the block holds ${what}; only one-dimensional NMR FIDs and spectra are read`, {
      label: 'DATA TYPE',
    });
  if (type !== 'NMRFID' && type !== 'NMRSPECTRUM') return unsupported(`"${shown(text)}"`);
  const dimensions = Number(headerText(header, 'NUMDIM') ?? '1');
  if (dimensions > 1) return unsupported(`${dimensions} dimensions (##NUM DIM=)`);
  if (/^N?D|\bND\b|2D/i.test(headerText(header, 'NTUPLES') ?? ''))
    return unsupported(`"${shown(headerText(header, 'NTUPLES')!)}"`);
  if (dataClass !== '' && dataClass !== 'XYDATA' && dataClass !== 'NTUPLES')
    return unsupported(`data of class "${shown(dataClass)}"`);
  return ok(type === 'NMRFID' ? 'fid' : 'spectrum');
}
