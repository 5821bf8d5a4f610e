import { lorentzSum } from './lorentzSum.js';
import type { Line } from './pattern.js';

/** A maximum that the eye sees in a drawn pattern. */
export interface PatternPeak {
  /** Hz from the signal's shift. */
  readonly offsetHz: number;
  /** Height relative to the tallest peak. */
  readonly height: number;
}

const pointsPerWidth = 12;
/** Of the tallest peak; the outermost line of a nonet still counts, what is fainter is not seen by eye. */
const faintest = 0.0125;
const pointsMax = 200_000;

/**
 * The peaks of a pattern at a line width: what is left of a stick pattern when lines have a width.
 *
 * @param lines    Hz from the centre, any number
 * @param widthHz  full width at half height, Hz
 * @returns by descending offset
 */
export function patternPeaks(lines: readonly Line[], widthHz: number): PatternPeak[] {
  if (lines.length === 0) return [];
  const strong = lines.filter((line) => line.share > 1e-4);
  const high = Math.max(...strong.map((line) => line.offsetHz)) + 2 * widthHz;
  const low = Math.min(...strong.map((line) => line.offsetHz)) - 2 * widthHz;
  const step = Math.max(widthHz / pointsPerWidth, (high - low) / pointsMax);
  const count = Math.ceil((high - low) / step) + 1;
  const heights = Array.from({ length: count }, (_, index) => lorentzSum(strong, widthHz, high - index * step));
  const tallest = Math.max(...heights);
  const peaks: PatternPeak[] = [];
  for (let index = 1; index + 1 < count; index++) {
    const [before, here, after] = [heights[index - 1]!, heights[index]!, heights[index + 1]!];
    if (here < faintest * tallest || here <= before || here < after) continue;
    // Vertex of the parabola through three points.
    const vertex = (0.5 * (before - after)) / (before - 2 * here + after);
    peaks.push({ offsetHz: high - (index + vertex) * step, height: here / tallest });
  }
  return peaks;
}
