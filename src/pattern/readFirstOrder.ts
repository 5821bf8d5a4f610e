import { firstOrderLines } from './firstOrderLines.js';
import type { Pattern, Splitting } from './pattern.js';
import { patternPeaks } from './patternPeaks.js';
import { letterFor } from './splittingLetters.js';

/** A local maximum of a spectrum. */
export interface ObservedPeak {
  /** Hz, on any scale; descending within a multiplet. */
  readonly hz: number;
  readonly height: number;
}

/** A first-order pattern read off the peaks of a multiplet. */
export interface ReadPattern {
  readonly pattern: Pattern;
  readonly centreHz: number;
}

/** Peaks below this share of the tallest are left out of the reading, observed and predicted alike. */
const faintest = 0.06;
/** Root mean square of height differences, tallest peak 1, up to which a pattern is believed; roofs lean by that much. */
const heightsMax = 0.16;
/** What a further splitting must gain. */
const splittingCost = 0.02;
const couplingHzRange: readonly [number, number] = [0.8, 60];

const singles = [1, 2, 3, 4, 5, 6, 7, 8].map((n) => [n]);
const doubles = [1, 2, 3].flatMap((a) => [1, 2, 3].map((b) => [a, b])).filter(([a, b]) => a! + b! <= 5);
const triples = [1, 2, 3].map((c) => [1, 1, c]);

/**
 * Reads the first-order pattern of a resolved multiplet from its peaks alone: whole width and first distances give the
 * couplings of every pattern that could be meant; the one whose peaks and heights agree best, with few splittings, is taken.
 *
 * @param peaks    of one multiplet, by descending Hz
 * @param widthHz  full width at half height of a line, Hz
 * @returns pattern with couplings (0.1 Hz) and its centre, or undefined when none agrees
 * @source  after T. R. Hoye, P. R. Hanson, J. R. Vyvyan, J. Org. Chem. 59 (1994) 4096-4103 (from memory)
 */
export function readFirstOrder(peaks: readonly ObservedPeak[], widthHz: number): ReadPattern | undefined {
  const tallest = Math.max(0, ...peaks.map(({ height }) => height));
  const seen = peaks
    .filter(({ height }) => height >= faintest * tallest)
    .map(({ hz, height }) => ({ hz, height: height / tallest }));
  const [first, last] = [seen[0], seen.at(-1)];
  if (first === undefined || last === undefined) return undefined;
  const centreHz = (first.hz + last.hz) / 2;
  let best: { pattern: Pattern; score: number } | undefined;
  for (const pattern of candidates(seen)) {
    const miss = compare(pattern, seen, centreHz, widthHz);
    const score = miss + splittingCost * pattern.splittings.length;
    if (miss <= heightsMax && (best === undefined || score < best.score)) best = { pattern, score };
  }
  return best === undefined ? undefined : { pattern: best.pattern, centreHz };
}

function candidates(seen: readonly ObservedPeak[]): Pattern[] {
  const span = seen[0]!.hz - seen.at(-1)!.hz;
  if (seen.length === 1) return [patternOf([], [])];
  const gaps = seen.slice(1, 5).map(({ hz }) => seen[0]!.hz - hz);
  const found: Pattern[] = [];
  const add = (neighbours: readonly number[], couplings: readonly number[]) => {
    const isFalling = couplings.every((coupling, index) => index === 0 || coupling <= couplings[index - 1]! + 1e-9);
    const isUsual = couplings.every((coupling) => coupling >= couplingHzRange[0] && coupling <= couplingHzRange[1]);
    if (isFalling && isUsual) found.push(patternOf(neighbours, couplings));
  };
  for (const [n] of singles) {
    add([n!], [span / n!]);
    // The outermost lines of a septet hold 1/64 each and are below the threshold.
    if (n! > 4) add([n!], [span / (n! - 2)]);
    if (n! > 7) add([n!], [span / (n! - 4)]);
  }
  for (const [a, b] of doubles) for (const gap of gaps) add([a!, b!], [(span - b! * gap) / a!, gap]);
  for (const [a, b, c] of triples)
    for (const gap of gaps.slice(0, 2)) for (const next of gaps) add([a!, b!, c!], [span - next - c! * gap, next, gap]);
  return found;
}

function patternOf(neighbours: readonly number[], couplings: readonly number[]): Pattern {
  const splittings = neighbours.map((count, index): Splitting => {
    return { letter: letterFor(count)!, neighbours: count, couplingHz: Math.round(couplings[index]! * 10) / 10 };
  });
  const text = splittings.length === 0 ? 's' : splittings.map(({ letter }) => letter).join('');
  return { text, splittings, isBroad: false, isMultiplet: false };
}

/** Root mean square of the height differences of matched peaks; infinite when a peak of either side has no partner. */
function compare(pattern: Pattern, seen: readonly ObservedPeak[], centreHz: number, widthHz: number): number {
  const predicted = patternPeaks(firstOrderLines(pattern), widthHz).filter(({ height }) => height >= faintest);
  if (predicted.length !== seen.length) return Number.POSITIVE_INFINITY;
  const reach = Math.max(0.4, 0.4 * widthHz);
  let sum = 0;
  for (const [index, peak] of predicted.entries()) {
    const { hz, height } = seen[index]!;
    if (Math.abs(centreHz + peak.offsetHz - hz) > reach) return Number.POSITIVE_INFINITY;
    sum += (height - peak.height) ** 2;
  }
  return Math.sqrt(sum / predicted.length);
}
