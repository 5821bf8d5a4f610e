import { baselineBins, sumTails } from './baselineBins.js';
import { chooseSmoothness } from './chooseSmoothness.js';
import { holdBelow } from './holdBelow.js';
import type { LineTails } from './lineTails.js';
import { maskHidden, maskLines } from './maskSignals.js';
import { medianOf } from './medianOf.js';

export interface Flattened {
  /** shape (n), baseline removed */
  readonly real: Float64Array;
  /** rms noise of one real point */
  readonly noise: number;
  /** Standard uncertainty of the local baseline level. */
  readonly baselineU: number;
  /** shape (n), 1 where a signal was masked */
  readonly masked: Uint8Array;
  readonly maskedShare: number;
  /** Bends that the smoother may make from end to end; 0: a straight line. */
  readonly bends: number;
}

const binCountMax = 1024;

/**
 * Removes a slow baseline with every signal masked and the tails of the fitted lines taken out of the way, and measures the noise
 * where no signal is. How far the baseline may bend is chosen by generalised cross-validation.
 *
 * @param real    in phase, shape (n)
 * @param tails   lines with areas and widths, for mask and tails
 * @param stepHz  Hz between points
 * @param isFlat  true leaves the baseline alone and only measures
 * @param independent independent points behind the n (before zero filling)
 * @returns flat real part, noise and the uncertainty of the level
 * @source masked second-difference smoother (Whittaker 1923; Eilers 2003) on bin means; Craven, Wahba, Numer. Math. 1979, 31, 377
 */
export function flattenBaseline(
  real: Float64Array,
  tails: readonly LineTails[],
  isFlat: boolean,
  independent: number,
): Flattened {
  const n = real.length;
  const rough = roughNoise(real);
  const masked = maskLines(n, tails, rough);
  const binCount = Math.min(binCountMax, Math.floor(n / 8));
  const tailSum = sumTails(n, tails, binCount);
  const independence = (2 * independent) / n;
  const first = baselineBins(real, masked, tailSum);
  const coarse = chooseSmoothness(first.means, first.weights, rough, independence);
  maskHidden(real, masked, tailSum.at, coarse.levels, rough, tails);
  const bins = baselineBins(real, masked, tailSum);
  const { levels: smooth, bends, freedom, lambda } = chooseSmoothness(bins.means, bins.weights, rough, independence);
  const levels = lambda > 0 ? holdBelow(real, bins, smooth, lambda, rough) : smooth;
  const flat = isFlat ? Float64Array.from(real) : subtract(real, levels);
  const free = masked.reduce((count, value) => count + (value === 0 ? 1 : 0), 0);
  const noise = noiseOf(flat, masked, tailSum.at);
  const perLevel = Math.max(1, ((free / n) * independent) / freedom);
  return {
    real: flat,
    noise,
    baselineU: (isFlat ? 0.1 : 1) * (noise / Math.sqrt(perLevel)),
    masked,
    maskedShare: 1 - free / n,
    bends,
  };
}

/** Noise from second differences of points eight apart: blind to slow baselines and, by the median, to lines. */
function roughNoise(real: Float64Array): number {
  const stride = Math.max(1, Math.floor(real.length / 8000));
  const differences: number[] = [];
  for (let i = 8; i < real.length - 8; i += stride) differences.push(Math.abs(real[i]! - (real[i - 8]! + real[i + 8]!) / 2));
  return Math.max((1.4826 * medianOf(differences)) / Math.sqrt(1.5), Number.MIN_VALUE);
}

/** Subtracts bin levels, interpolated linearly between bin centres. */
function subtract(real: Float64Array, levels: Float64Array): Float64Array {
  const n = real.length;
  const flat = new Float64Array(n);
  const count = levels.length;
  for (let i = 0; i < n; i += 1) {
    const place = ((i + 0.5) * count) / n - 0.5;
    const left = Math.max(0, Math.min(count - 2, Math.floor(place)));
    flat[i] = real[i]! - (levels[left]! + (levels[left + 1]! - levels[left]!) * (place - left));
  }
  return flat;
}

/** Variance of a standard normal clipped at 3: what clipping takes away. */
const clippedVariance = 0.97334;

/** rms of the signal-free points, tails taken out, clipped at three times itself. */
function noiseOf(flat: Float64Array, masked: Uint8Array, tailAt: (i: number) => number): number {
  const stride = Math.max(1, Math.floor(flat.length / 70_000));
  const values: number[] = [];
  for (let i = 0; i < flat.length; i += stride) if (masked[i] === 0) values.push(flat[i]! - tailAt(i));
  if (values.length < 200) return roughNoise(flat);
  const every = Math.max(1, Math.floor(values.length / 8000));
  let sigma = 1.4826 * medianOf(values.filter((_, k) => k % every === 0).map(Math.abs));
  for (let turn = 0; turn < 3; turn += 1) {
    let [sum, count] = [0, 0];
    for (const value of values) {
      if (Math.abs(value) > 3 * sigma) continue;
      sum += value * value;
      count += 1;
    }
    sigma = Math.sqrt(sum / Math.max(1, count) / clippedVariance);
  }
  return Math.max(sigma, Number.MIN_VALUE);
}
