import type { Quantity } from '../base/quantity.js';

/** One term of a share: a value with its own independent standard uncertainty. */
export interface ShareTerm {
  readonly value: number;
  readonly u: number;
  /** Counts in the numerator as well. */
  readonly counted: boolean;
}

/**
 * The share of the counted terms in the sum of all, with the standard uncertainty that the common terms leave.
 *
 * @param terms independent values, in one unit
 * @returns undefined when the sum is not above zero
 * @source  share s = C/(C+R): ds/dc = R/(C+R)^2, ds/dr = -C/(C+R)^2; JCGM 100:2008, Eq. 10
 */
export function shareOf(terms: readonly ShareTerm[]): Quantity | undefined {
  const counted = terms.reduce((sum, term) => sum + (term.counted ? term.value : 0), 0);
  const total = terms.reduce((sum, { value }) => sum + value, 0);
  if (!(total > 0)) return undefined;
  const rest = total - counted;
  const variance = terms.reduce((sum, { u, counted: inside }) => sum + (((inside ? rest : counted) / total ** 2) * u) ** 2, 0);
  return { value: counted / total, u: Math.sqrt(variance) };
}
