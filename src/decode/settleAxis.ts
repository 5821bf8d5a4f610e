import type { Flag } from '../base/flag.js';
import { ok, type Result } from '../base/result.js';
import { checkAbscissa } from './checkAbscissa.js';
import { tolerated } from './jcampProblem.js';
import type { AbscissaPlan } from './layout.js';
import type { TableState } from './tableState.js';

/** The abscissa that a table bears out, with what had to be tolerated. */
export interface SettledAxis {
  readonly abscissa: AbscissaPlan;
  readonly flags: readonly Flag[];
}

/**
 * Checks the abscissa as stated; where that fails, checks it with LAST one step nearer, because some writers state first + n steps.
 *
 * The second reading is tried only where DELTAX, or a factor that is the step, speaks for it, and counts only when the abscissae of
 * the table bear it out.
 *
 * @errors those of `checkAbscissa`, for the abscissa as stated
 */
export function settleAxis(state: TableState, stated: AbscissaPlan): Result<SettledAxis> {
  const asStated = checkAbscissa(state, stated);
  if (asStated.ok) return ok({ abscissa: stated, flags: asStated.value });
  const abscissa = withNearerLast(stated, state.count);
  const nearer = abscissa ? checkAbscissa(state, abscissa) : undefined;
  if (!abscissa || !nearer?.ok) return asStated;
  const text = `the last abscissa is stated as ${stated.last.value}, one step beyond the last of ${state.count} points; ${abscissa.last.value} is used`;
  return ok({ abscissa, flags: [tolerated('jcamp-last-abscissa', text), ...nearer.value] });
}

function withNearerLast(stated: AbscissaPlan, points: number): AbscissaPlan | undefined {
  const { first, last, factor } = stated;
  const step = Math.abs((stated.delta ?? factor).value);
  const span = last.value - first.value;
  if (step === 0 || Math.abs(Math.abs(span) / step - points) > 0.05) return undefined;
  const value = first.value + Math.sign(span) * step * (points - 1);
  return { ...stated, last: { ...last, value, rounding: last.rounding + first.rounding + step * 1e-6 * points } };
}
