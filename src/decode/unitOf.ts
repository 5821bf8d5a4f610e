import { ok, type Result } from '../base/result.js';
import { refuse, shown } from './jcampProblem.js';
import type { AbscissaPlan } from './layout.js';

type Unit = Pick<AbscissaPlan, 'unit' | 'scale'>;

/** Units understood, without case and blanks. The standard knows HZ, PPM and SECONDS; the rest occurs in the field. */
const units = new Map<string, Unit>([
  ['HZ', { unit: 'Hz', scale: 1 }],
  ['HERTZ', { unit: 'Hz', scale: 1 }],
  ['PPM', { unit: 'ppm', scale: 1 }],
  ['SECONDS', { unit: 's', scale: 1 }],
  ['SECOND', { unit: 's', scale: 1 }],
  ['SEC', { unit: 's', scale: 1 }],
  ['S', { unit: 's', scale: 1 }],
  ['MILLISECONDS', { unit: 's', scale: 1e-3 }],
  ['MSEC', { unit: 's', scale: 1e-3 }],
  ['MS', { unit: 's', scale: 1e-3 }],
  ['MICROSECONDS', { unit: 's', scale: 1e-6 }],
  ['USEC', { unit: 's', scale: 1e-6 }],
  ['US', { unit: 's', scale: 1e-6 }],
]);

/**
 * Reads the unit of the abscissa and holds it against the kind of data: a FID counts time, a spectrum frequency or shift.
 *
 * @errors jcamp-units
 */
export function unitOf(text: string | undefined, kind: 'fid' | 'spectrum', label: string): Result<Unit> {
  const found = units.get((text ?? '').replace(/\s/g, '').toUpperCase());
  const expected = kind === 'fid' ? 'SECONDS' : 'HZ or PPM';
  if (!found)
    return refuse('jcamp-units', `##${label}= is "${shown(text ?? '')}" for the abscissa; expected ${expected}`, { label });
  if ((found.unit === 's') !== (kind === 'fid'))
    return refuse(
      'jcamp-units',
      `the abscissa of a ${kind === 'fid' ? 'FID' : 'spectrum'} is in "${shown(text ?? '')}"; expected ${expected}`,
      {
        label,
      },
    );
  return ok(found);
}
