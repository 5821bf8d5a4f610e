import type { Quantity } from '../base/quantity.js';
import type { Method } from '../method/method.js';
import { shareOf } from './shareOf.js';

const uMax = 0.3;

/**
 * Conversion: n(to)/s over n(of) + n(to)/s, s the stoichiometry; without `to` the sum runs over every intermediate and product.
 *
 * @param method  with its `conversion` block
 * @param amounts moles by species id, one scale
 * @returns undefined without a `conversion` block, or when a species it needs was not measured
 * @source  contract section 6, Definitions
 */
export function conversionOf(method: Method, amounts: ReadonlyMap<string, Quantity>): Quantity | undefined {
  const { conversion } = method;
  if (!conversion) return undefined;
  const formed = method.species.filter(({ id, role }) =>
    conversion.to !== undefined ? id === conversion.to : id !== conversion.of && (role === 'intermediate' || role === 'product'),
  );
  const start = amounts.get(conversion.of);
  if (!start || formed.length === 0) return undefined;
  const terms = formed.flatMap(({ id, stoichiometry }) => {
    const amount = amounts.get(id);
    return amount ? [{ value: amount.value / stoichiometry, u: amount.u / stoichiometry, counted: true }] : [];
  });
  if (terms.length < formed.length) return undefined;
  const share = shareOf([{ ...start, counted: false }, ...terms]);
  // An uncertainty as wide as the scale says nothing: it is not stated.
  return share && share.u < uMax ? share : undefined;
}
