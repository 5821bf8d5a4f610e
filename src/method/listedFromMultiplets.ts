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

/** Areas below this share of the largest are 13C satellites and traces: a tert-butyl group still leaves a single proton. */
const traceShare = 0.04;
/** Signals below this part of one nucleus are traces of something else. */
const traceNuclei = 0.5;
/** The largest count tried for any one signal when looking for the area of one nucleus. */
const countMax = 9;
/** Areas of a summed multiplet are good to this many nuclei: slow relaxation alone costs several per cent. */
const spread = (nuclei: number) => 0.06 * nuclei + 0.03;
/** In squared spreads: what a trace costs, and what a count costs per unit of its logarithm. */
const traceCost = 2;
const countCost = 2.2;
/** Two signals that share a coupling show how many nuclei the other has; a count that does not agree costs this. */
const partnerCost = 6;
const sameCouplingHz = 0.3;
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
  const main = found.filter(({ area }) => area > traceShare * largest);
  if (main.length === 0) return [];
  const unit = unitArea(
    main.map(({ area }) => area),
    partnerCounts(main),
  );
  const strong = main.filter(({ area }) => area >= traceNuclei * unit);
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

/**
 * Area of one nucleus: every signal in turn is 1, 2, 3 ... nuclei; the choice that makes the others most nearly whole, with few
 * traces and small counts, is taken. A large count is always nearly whole, and so proves little.
 */
function unitArea(areas: readonly number[], wanted: ReadonlyMap<number, number>): number {
  const units = areas.flatMap((area) => Array.from({ length: countMax }, (_, index) => area / (index + 1)));
  const pairs = units.flatMap((one) =>
    units.filter((other) => other > one && other < 1.2 * one).map((other) => (one + other) / 2),
  );
  let best = { unit: Math.max(...areas), cost: Number.POSITIVE_INFINITY };
  for (const unit of [...units, ...pairs]) {
    const cost = areas.reduce((sum, area, index) => {
      const count = area / unit;
      if (count < traceNuclei) return sum + traceCost;
      const nuclei = Math.max(1, Math.round(count));
      const isAgainst = nuclei % (wanted.get(index) ?? 1) !== 0;
      return sum + ((count - nuclei) / spread(nuclei)) ** 2 + countCost * Math.log(nuclei) + (isAgainst ? partnerCost : 0);
    }, 0);
    if (cost < best.cost - 1e-12) best = { unit, cost };
  }
  return best.unit;
}

/** A quartet and a triplet of one coupling belong to two and three nuclei: index -> count, where the partner is certain. */
function partnerCounts(found: readonly FoundMultiplet[]): Map<number, number> {
  const single = found.flatMap(({ pattern, couplingsHz }, index) => {
    const parsed = parsePattern(pattern, couplingsHz ?? []);
    const splittings = parsed.ok ? parsed.value.splittings : [];
    const [only] = splittings;
    return splittings.length === 1 && only?.couplingHz !== undefined
      ? [{ index, neighbours: only.neighbours, couplingHz: only.couplingHz }]
      : [];
  });
  return new Map(
    single.flatMap((one) => {
      const partners = single.filter((other) => other !== one && Math.abs(other.couplingHz - one.couplingHz) <= sameCouplingHz);
      return partners.length === 1 ? [[one.index, partners[0]!.neighbours] as const] : [];
    }),
  );
}
