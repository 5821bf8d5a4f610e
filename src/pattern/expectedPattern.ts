import { letterFor } from './splittingLetters.js';
import type { Neighbour, StructureGroup } from './structure.js';

/** Couplings this near are one splitting to the n + 1 rule. */
const likeHz = 1.5;

/** One splitting that a structure leads to expect. */
export interface ExpectedSplitting {
  readonly neighbours: number;
  readonly usualHz: number;
}

/**
 * The splittings of a group by the n + 1 rule: neighbours of similar coupling count together, the others multiply.
 *
 * @param group  of a structure
 * @returns by falling usual coupling, Hz; exchanging and four-bond neighbours left out
 * @source  n + 1 rule (common practice)
 */
export function expectedSplittings(group: StructureGroup): ExpectedSplitting[] {
  const seen = group.isExchangeable ? [] : group.neighbours.filter(({ kind }) => kind === 'clear' || kind === 'small');
  const splittings: { neighbours: number; usualHz: number }[] = [];
  for (const { count, usualHz, element } of seen) {
    const last = splittings.at(-1);
    if (last !== undefined && element === 'H' && last.usualHz - usualHz <= likeHz) last.neighbours += count;
    else splittings.push({ neighbours: count, usualHz });
  }
  return splittings;
}

/**
 * The pattern that the n + 1 rule gives a group, as printed: `q`, `dd`, `sext`; `m` above eight neighbours or four splittings.
 */
export function expectedPattern(group: StructureGroup): string {
  const letters = expectedSplittings(group).map(({ neighbours }) => letterFor(neighbours));
  if (letters.some((letter) => letter === undefined) || letters.length > 4) return 'm';
  return letters.length === 0 ? 's' : letters.join('');
}

/** Number of neighbours that split a group for certain, and with those that may. */
export function neighbourRange(neighbours: readonly Neighbour[]): readonly [number, number] {
  const sum = (kinds: readonly string[]) =>
    neighbours.filter(({ kind }) => kinds.includes(kind)).reduce((total, { count }) => total + count, 0);
  return [sum(['clear']), sum(['clear', 'small', 'long'])];
}
