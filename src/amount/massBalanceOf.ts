import type { Quantity } from '../base/quantity.js';
import type { Method } from '../method/method.js';
import type { Amounts, SpeciesAmount } from './amounts.js';
import type { StartAmounts } from './deriveAmounts.js';

/**
 * What became of the followed starting material: n(of) plus everything formed from it by stoichiometry, over the amount at time zero.
 *
 * @returns undefined on a relative scale, where a balance says nothing
 * @source common practice: a balance that drifts points to precipitation, evaporation, an unseen species or relaxation
 */
export function massBalanceOf(
  method: Method,
  species: Readonly<Record<string, SpeciesAmount>>,
  unit: Amounts['unit'],
  start: StartAmounts | undefined,
): Quantity | undefined {
  const { conversion } = method;
  if (!conversion || !start || start.unit !== unit || unit === 'relative' || !(start.amount.value > 0)) return undefined;
  const parts = method.species.filter(
    ({ id, role }) =>
      id === conversion.of || id === conversion.to || role === 'intermediate' || role === 'product' || role === 'by-product',
  );
  let [sum, variance] = [0, 0];
  for (const { id, stoichiometry } of parts) {
    const amount = species[id];
    if (!amount) return undefined;
    sum += amount.amount / stoichiometry;
    variance += (amount.u / stoichiometry) ** 2;
  }
  const value = sum / start.amount.value;
  return { value, u: Math.hypot(Math.sqrt(variance) / start.amount.value, (value * start.amount.u) / start.amount.value) };
}
