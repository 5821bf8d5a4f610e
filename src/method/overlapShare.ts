import { lorentzSum } from '../pattern/lorentzSum.js';
import type { Line } from '../pattern/pattern.js';

/** A pattern at its place in a spectrum. */
export interface PlacedPattern {
  /** Hz on a scale that all patterns share. */
  readonly centreHz: number;
  readonly lines: readonly Line[];
}

const pointsPerWidth = 5;
/** Line widths on either side of the outermost lines; beyond them lies less than a hundredth of the area. */
const marginWidths = 30;
const pointsMax = 100_000;

/**
 * The share of two signals that lies under each other: the integral of the lower of both curves, each of unit area.
 *
 * @param a        one signal
 * @param b        another
 * @param widthHz  full width at half height of every line, Hz
 * @returns 0 (apart) to 1 (the same curve)
 * @source  overlap coefficient of two distributions (common practice)
 */
export function overlapShare(a: PlacedPattern, b: PlacedPattern, widthHz: number): number {
  const [lowA, highA] = extent(a);
  const [lowB, highB] = extent(b);
  const margin = marginWidths * widthHz;
  if (lowA - highB > 2 * margin || lowB - highA > 2 * margin) return 0;
  const low = Math.min(lowA, lowB) - margin;
  const high = Math.max(highA, highB) + margin;
  const step = Math.max(widthHz / pointsPerWidth, (high - low) / pointsMax);
  let sum = 0;
  for (let at = low; at <= high; at += step) {
    sum += Math.min(lorentzSum(a.lines, widthHz, at - a.centreHz), lorentzSum(b.lines, widthHz, at - b.centreHz));
  }
  return Math.min(1, sum * step);
}

/** Lowest and highest line that carries more than a thousandth, Hz. */
export function extent({ centreHz, lines }: PlacedPattern): readonly [number, number] {
  const strong = lines.filter((line) => line.share > 1e-3).map((line) => centreHz + line.offsetHz);
  return [Math.min(...strong), Math.max(...strong)];
}
