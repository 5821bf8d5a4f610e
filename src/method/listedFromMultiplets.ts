import { invariant } from '../base/result.js';
import type { Listed } from '../pattern/parseListed.js';
import { parsePattern } from '../pattern/parsePattern.js';

/** A multiplet as found in a spectrum. */
export interface FoundMultiplet {
  readonly shiftPpm: number;
  readonly area: number;
  readonly pattern: string;
  readonly couplingsHz?: readonly number[];
}

/** Areas below this share of the largest are traces of something else. */
const traceShare = 0.05;
/** The largest count tried for the smallest signal. */
const smallestCountMax = 6;
const nucleiMax = 60;

/**
 * Turns found multiplets into listed signals. Counts of nuclei come from the areas: the smallest whole numbers that fit their
 * ratios. They are guesses, and right only when all signals belong to one compound.
 *
 * @param found  any order
 * @returns by descending shift; a pattern that cannot be read is a multiplet
 */
export function listedFromMultiplets(found: readonly FoundMultiplet[]): Listed[] {
  const largest = Math.max(0, ...found.map(({ area }) => area));
  const strong = found.filter(({ area }) => area > traceShare * largest);
  if (strong.length === 0) return [];
  const unit = unitArea(strong.map(({ area }) => area));
  return strong
    .map(({ shiftPpm, area, pattern, couplingsHz }): Listed => {
      const couplings = (couplingsHz ?? []).map((coupling) => Math.round(coupling * 10) / 10);
      const whole = parsePattern(pattern, couplings);
      const parsed = whole.ok ? whole : parsePattern('m', []);
      invariant(parsed.ok, 'a multiplet is always a pattern');
      const nuclei = Math.min(nucleiMax, Math.max(1, Math.round(area / unit)));
      return { shiftPpm: Math.round(shiftPpm * 1000) / 1000, pattern: parsed.value, nuclei };
    })
    .sort((a, b) => b.shiftPpm - a.shiftPpm);
}

/** Area of one nucleus: the smallest signal is 1, 2, 3 ... nuclei, whichever makes the others most nearly whole. */
function unitArea(areas: readonly number[]): number {
  const smallest = Math.min(...areas);
  let best = smallest;
  let bestMiss = Number.POSITIVE_INFINITY;
  for (let count = 1; count <= smallestCountMax; count++) {
    const unit = smallest / count;
    // Relative to the count itself: a large count is always nearly whole, and so proves little.
    const miss =
      areas.reduce((sum, area) => sum + Math.abs(area / unit - Math.round(area / unit)), 0) / areas.length + 0.03 * count;
    if (miss < bestMiss - 1e-12) {
      best = unit;
      bestMiss = miss;
    }
  }
  return best;
}
