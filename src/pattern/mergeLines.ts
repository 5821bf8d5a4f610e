import type { Line } from './pattern.js';

/**
 * Joins lines that coincide, at the centre of gravity of each group, and orders them from high to low frequency.
 *
 * @param lines        shape (n), any order
 * @param toleranceHz  Hz; a line this close to the running centre of its group joins it
 * @returns shape (m <= n), by descending offset; total share unchanged
 */
export function mergeLines(lines: readonly Line[], toleranceHz: number): Line[] {
  const ordered = [...lines].sort((a, b) => b.offsetHz - a.offsetHz);
  const merged: Line[] = [];
  let sum = 0;
  let moment = 0;
  for (const line of ordered) {
    const centre = sum > 0 ? moment / sum : Number.POSITIVE_INFINITY;
    if (sum > 0 && centre - line.offsetHz > toleranceHz) {
      merged.push({ offsetHz: centre, share: sum });
      sum = 0;
      moment = 0;
    }
    sum += line.share;
    moment += line.share * line.offsetHz;
  }
  if (sum > 0) merged.push({ offsetHz: moment / sum, share: sum });
  // Rounding of a symmetric pattern must not leave a centre at 1e-16 Hz.
  return merged.map((line) => (Math.abs(line.offsetHz) < 1e-9 ? { ...line, offsetHz: 0 } : line));
}
