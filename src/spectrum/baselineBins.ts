import type { LineTails } from './lineTails.js';

/** Means of the signal-free points in bins, the tails of known lines taken out. */
export interface BaselineBins {
  /** shape (m) */
  readonly means: Float64Array;
  /** shape (m): points that were free */
  readonly weights: Float64Array;
  /** Sum of the tails at a point. */
  readonly tailAt: (i: number) => number;
}

/** Up to this many points on either side tails are taken point by point, beyond at bin centres. */
const nearBins = 6;

/**
 * Bins what is not masked.
 *
 * @param real     shape (n)
 * @param masked   shape (n)
 * @param tails    lines whose tails are taken out
 * @param binCount m
 * @returns bin means with weights
 * @source tail of a Lorentzian: area w / (2 pi d^2)
 */
export function baselineBins(
  real: Float64Array,
  masked: Uint8Array,
  tails: readonly LineTails[],
  binCount: number,
): BaselineBins {
  const n = real.length;
  const width = n / binCount;
  const nearTail = new Float64Array(n);
  const farTail = new Float64Array(binCount);
  for (const { index, area, widthPoints } of tails) {
    const half = widthPoints / 2;
    const scale = (area * half) / Math.PI;
    const bin = Math.floor(index / width);
    const [firstBin, lastBin] = [Math.max(0, bin - nearBins), Math.min(binCount - 1, bin + nearBins)];
    for (let i = Math.ceil(firstBin * width); i < (lastBin + 1) * width && i < n; i += 1)
      nearTail[i] = nearTail[i]! + scale / ((i - index) ** 2 + half * half);
    for (let k = 0; k < binCount; k += 1) {
      if (k >= firstBin && k <= lastBin) continue;
      farTail[k] = farTail[k]! + scale / (((k + 0.5) * width - 0.5 - index) ** 2 + half * half);
    }
  }
  const binOf = (i: number) => Math.min(binCount - 1, Math.floor(i / width));
  const tailAt = (i: number) => nearTail[i]! + farTail[binOf(i)]!;
  const means = new Float64Array(binCount);
  const weights = new Float64Array(binCount);
  for (let i = 0; i < n; i += 1) {
    if (masked[i] === 1) continue;
    const bin = binOf(i);
    means[bin] = means[bin]! + real[i]! - nearTail[i]! - farTail[bin]!;
    weights[bin] = weights[bin]! + 1;
  }
  for (let bin = 0; bin < binCount; bin += 1) if (weights[bin]! > 0) means[bin] = means[bin]! / weights[bin]!;
  return { means, weights, tailAt };
}
