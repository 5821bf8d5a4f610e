import type { LineTails } from './lineTails.js';

/** Sum of the tails of known lines, near each line point by point, farther off bin by bin. */
export interface TailSum {
  readonly binCount: number;
  readonly at: (i: number) => number;
}

/** Up to this many bins on either side tails are taken point by point, beyond at bin centres. */
const nearBins = 4;

/**
 * Sums the absorption of lines over a spectrum.
 *
 * @param n        points
 * @param tails    lines
 * @param binCount bins of the baseline
 * @source absorption Lorentzian: area (w/2) / pi / (d^2 + (w/2)^2)
 */
export function sumTails(n: number, tails: readonly LineTails[], binCount: number): TailSum {
  const width = n / binCount;
  const near = new Float64Array(n);
  const far = new Float64Array(binCount);
  for (const { index, area, widthPoints } of tails) {
    const half = widthPoints / 2;
    const scale = (area * half) / Math.PI;
    const square = half * half;
    const bin = Math.floor(index / width);
    const firstBin = Math.max(0, bin - nearBins);
    const lastBin = Math.min(binCount - 1, bin + nearBins);
    const end = Math.min(n, Math.ceil((lastBin + 1) * width));
    for (let i = Math.ceil(firstBin * width); i < end; i += 1) {
      const distance = i - index;
      near[i] = near[i]! + scale / (distance * distance + square);
    }
    for (let k = 0; k < binCount; k += 1) {
      if (k >= firstBin && k <= lastBin) continue;
      const distance = (k + 0.5) * width - 0.5 - index;
      far[k] = far[k]! + scale / (distance * distance + square);
    }
  }
  return { binCount, at: (i) => near[i]! + far[Math.min(binCount - 1, Math.floor(i / width))]! };
}

/** Means of the signal-free points in bins, the tails of known lines taken out. */
export interface BaselineBins {
  /** shape (m) */
  readonly means: Float64Array;
  /** shape (m): points that were free */
  readonly weights: Float64Array;
}

/**
 * Bins what is not masked.
 *
 * @param real   shape (n)
 * @param masked shape (n)
 * @param tails  taken out of every point
 * @returns bin means with weights
 */
export function baselineBins(real: Float64Array, masked: Uint8Array, tails: TailSum): BaselineBins {
  const n = real.length;
  const { binCount } = tails;
  const means = new Float64Array(binCount);
  const weights = new Float64Array(binCount);
  for (let i = 0; i < n; i += 1) {
    if (masked[i] === 1) continue;
    const bin = Math.min(binCount - 1, Math.floor((i * binCount) / n));
    means[bin] = means[bin]! + real[i]! - tails.at(i);
    weights[bin] = weights[bin]! + 1;
  }
  for (let bin = 0; bin < binCount; bin += 1) if (weights[bin]! > 0) means[bin] = means[bin]! / weights[bin]!;
  return { means, weights };
}
