import type { Pattern } from './pattern.js';

/**
 * The number of spin-1/2 neighbours that a pattern shows: a quartet three, a doublet of triplets three.
 *
 * @param pattern  declared or found
 * @returns a count, or undefined when the pattern declares no lines (`m`)
 * @source  n + 1 rule read backwards (common practice)
 */
export function neighboursImplied(pattern: Pattern): number | undefined {
  return pattern.isMultiplet ? undefined : pattern.splittings.reduce((sum, { neighbours }) => sum + neighbours, 0);
}
