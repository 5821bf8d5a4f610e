import type { Flag } from '../base/flag.js';
import { tolerated } from './jcampProblem.js';
import type { AbscissaPlan } from './layout.js';

/**
 * Sets right a LAST abscissa that lies one step beyond the last point: some writers state first + n steps.
 *
 * Only where DELTAX, or a factor that is the step, shows it; the abscissae of the table are held against the result afterwards.
 *
 * @param points number of points found
 */
export function settleLast(abscissa: AbscissaPlan, points: number): { abscissa: AbscissaPlan; flags: Flag[] } {
  const { first, last, factor } = abscissa;
  const step = Math.abs((abscissa.delta ?? factor).value);
  const span = last.value - first.value;
  if (step === 0 || Math.abs(Math.abs(span) / step - points) > 0.05) return { abscissa, flags: [] };
  const value = first.value + Math.sign(span) * step * (points - 1);
  const text = `the last abscissa is stated as ${last.value}, one step beyond the last of ${points} points; ${value} is used`;
  return {
    abscissa: { ...abscissa, last: { ...last, value, rounding: last.rounding + first.rounding + step * 1e-6 * points } },
    flags: [tolerated('jcamp-last-abscissa', text)],
  };
}
