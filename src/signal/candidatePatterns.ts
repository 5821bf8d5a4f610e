import { splittingLetters } from '../pattern/splittingLetters.js';
import type { Peak } from './pickPeaks.js';

/** A pattern that a set of lines might be, with couplings to start from. */
export interface CandidatePattern {
  /** Neighbours per splitting, largest coupling first: [] is a singlet, [1, 2] a doublet of triplets. */
  readonly neighbours: readonly number[];
  /** Hz, descending. */
  readonly couplingsHz: readonly number[];
  readonly centreHz: number;
}

const single = [1, 2, 3, 4, 5, 6] as const;
const double: readonly (readonly [number, number])[] = [
  [1, 1],
  [1, 2],
  [2, 1],
  [1, 3],
  [3, 1],
  [2, 2],
  [2, 3],
  [3, 2],
];
const couplingMaxHz = 25;

/**
 * Proposes the first-order patterns that a set of lines may be, with couplings read off the distances: the whole width is
 * sum n(k) J(k), the distance from the outermost line to the next ones the smallest couplings.
 *
 * @param peaks     lines found, by descending shift
 * @param listedHz  couplings that the method lists, as further starts
 * @param widthHz  line width: couplings far below it are not proposed, some near it are, since they do not show as gaps
 * @source  first-order rules, T. R. Hoye, P. R. Hanson, J. R. Vyvyan, J. Org. Chem. 1994, 59, 4096 (from memory)
 */
export function candidatePatterns(peaks: readonly Peak[], listedHz: readonly number[], widthHz: number): CandidatePattern[] {
  const first = peaks[0]!.shiftHz;
  const last = peaks.at(-1)!.shiftHz;
  const spread = first - last;
  const tallest = peaks.reduce((best, peak) => (peak.area > best.area ? peak : best));
  const candidates: CandidatePattern[] = [{ neighbours: [], couplingsHz: [], centreHz: tallest.shiftHz }];
  const add = (neighbours: readonly number[], couplingsHz: readonly number[], centreHz: number) => {
    const isUsable = couplingsHz.every(
      (j, k) => j > 0.35 * widthHz && j < couplingMaxHz && (k === 0 || j <= couplingsHz[k - 1]! * 1.001),
    );
    if (isUsable) candidates.push({ neighbours, couplingsHz, centreHz });
  };
  const middle = (first + last) / 2;
  for (const n of single) {
    add([n], [spread / n], middle);
    // The outermost lines of a septet hold 1/64 each and hide in noise.
    if (n >= 4) add([n], [spread / (n - 2)], middle);
    for (const j of listedHz) if (Math.abs(spread - n * j) > 0.3) add([n], [j], middle);
  }
  const gaps = peaks.slice(1, 5).map((peak) => first - peak.shiftHz);
  const smalls = [...gaps, ...peaks.slice(-3, -1).map((peak) => peak.shiftHz - last), 0.8 * widthHz, 1.4 * widthHz];
  // Where the smaller coupling does not show as a gap, the distance of the humps is the larger one.
  for (const [a, b] of double) for (const part of [0.8, 1.2]) add([a, b], [spread / a, part * widthHz], middle);
  for (const [a, b] of double) for (const gap of smalls) add([a, b], [(spread - b * gap) / a, gap], middle);
  for (const smallest of [...gaps.slice(0, 2), 1.2 * widthHz]) {
    for (const next of gaps.slice(0, 3)) {
      if (next >= smallest) add([1, 1, 1], [spread - next - smallest, next, smallest], middle);
    }
  }
  return candidates;
}

/** The letters of a pattern: `dt` for [1, 2]. */
export function lettersOf(neighbours: readonly number[]): string {
  return neighbours.length === 0 ? 's' : neighbours.map((n) => splittingLetters[n] ?? 'm').join('');
}
