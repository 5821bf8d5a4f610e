import type { Line } from './pattern.js';

/**
 * Splits every line by one set of equivalent neighbours: the convolution of two stick patterns.
 *
 * @param lines      shape (n)
 * @param weights    shape (m), relative intensities of the splitting, any sum
 * @param spacingHz  Hz between neighbouring lines of the splitting
 * @returns shape (n x m), unmerged; total share unchanged
 */
export function splitLines(lines: readonly Line[], weights: readonly number[], spacingHz: number): Line[] {
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  const middle = (weights.length - 1) / 2;
  return lines.flatMap((line) =>
    weights.map((weight, index) => ({
      offsetHz: line.offsetHz + (middle - index) * spacingHz,
      share: (line.share * weight) / total,
    })),
  );
}
