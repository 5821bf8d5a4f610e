import type { ComplexSpectrum } from './complexSpectrum.js';
import type { Peak } from './findPeaks.js';
import { medianOf } from './medianOf.js';
import { smoothBanded } from './smoothBanded.js';

const binCount = 1024;
/** Bends of the baseline narrower than the spectrum over this many are left alone: they would be signal. */
const bendsMax = 14;
/** A line is masked to where its Lorentzian tail has fallen to this share of the noise. */
const tailOverNoise = 0.15;

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
}

/**
 * Removes a slow baseline with every signal masked, and measures the noise where no signal is.
 *
 * @param spectrum in phase, shape (n)
 * @param peaks    maxima with widths; their tails are masked down to a fraction of the noise
 * @param isFlat   true leaves the baseline alone and only measures
 * @returns flat real part, noise and the uncertainty of the level
 * @source masked second-difference smoother (Whittaker 1923; Eilers 2003) on bin means; noise by the median absolute deviation
 */
export function flattenBaseline(spectrum: ComplexSpectrum, peaks: readonly Peak[], isFlat: boolean): Flattened {
  const { real } = spectrum;
  const n = real.length;
  const rough = roughNoise(real);
  const masked = maskPeaks(n, peaks, rough);
  maskOutliers(real, masked, rough);
  const { means, weights } = binMeans(real, masked);
  const lambda = (means.length / (2 * Math.PI * bendsMax)) ** 4 * medianWeight(weights);
  const smooth = smoothBanded(means, weights, lambda);
  const flat = isFlat ? Float64Array.from(real) : subtract(real, smooth);
  const noise = noiseOf(flat, masked);
  const free = masked.reduce((count, value) => count + (value === 0 ? 1 : 0), 0);
  const perBend = Math.max(1, free / (2 * bendsMax));
  return {
    real: flat,
    noise,
    baselineU: isFlat ? noise * 0.1 : (2 * noise) / Math.sqrt(perBend / 2),
    masked,
    maskedShare: 1 - free / n,
  };
}

/** Noise from second differences of neighbours four apart: blind to slow baselines and, by the median, to lines. */
function roughNoise(real: Float64Array): number {
  const stride = Math.max(1, Math.floor(real.length / 20_000));
  const differences: number[] = [];
  for (let i = 8; i < real.length - 8; i += stride) differences.push(Math.abs(real[i]! - (real[i - 8]! + real[i + 8]!) / 2));
  return Math.max((1.4826 * medianOf(differences)) / Math.sqrt(1.5), Number.MIN_VALUE);
}

function maskPeaks(n: number, peaks: readonly Peak[], noise: number): Uint8Array {
  const masked = new Uint8Array(n);
  for (const { index, magnitude, widthPoints } of peaks) {
    const half = (widthPoints / 2) * Math.sqrt(magnitude / (tailOverNoise * noise));
    const reach = Math.min(Math.max(half, 3 * widthPoints), n / 24);
    masked.fill(1, Math.max(0, Math.floor(index - reach)), Math.min(n, Math.ceil(index + reach)));
  }
  return masked;
}

/** Whatever stands out of its neighbourhood is signal, peak or not. */
function maskOutliers(real: Float64Array, masked: Uint8Array, noise: number): void {
  const n = real.length;
  const section = Math.max(64, Math.floor(n / 256));
  for (let from = 0; from < n; from += section) {
    const to = Math.min(n, from + section);
    const stride = Math.max(1, Math.floor((to - from) / 64));
    const values: number[] = [];
    for (let i = from; i < to; i += stride) if (masked[i] === 0) values.push(real[i]!);
    if (values.length < 8) continue;
    const middle = medianOf(values);
    for (let i = from; i < to; i += 1) {
      if (masked[i] === 0 && Math.abs(real[i]! - middle) > 6 * noise) masked.fill(1, Math.max(0, i - 12), Math.min(n, i + 13));
    }
  }
}

function binMeans(real: Float64Array, masked: Uint8Array): { means: Float64Array; weights: Float64Array } {
  const n = real.length;
  const count = Math.min(binCount, Math.floor(n / 4));
  const means = new Float64Array(count);
  const weights = new Float64Array(count);
  for (let i = 0; i < n; i += 1) {
    if (masked[i] === 1) continue;
    const bin = Math.min(count - 1, Math.floor((i * count) / n));
    means[bin] = means[bin]! + real[i]!;
    weights[bin] = weights[bin]! + 1;
  }
  for (let bin = 0; bin < count; bin += 1) if (weights[bin]! > 0) means[bin] = means[bin]! / weights[bin]!;
  return { means, weights };
}

function medianWeight(weights: Float64Array): number {
  return Math.max(1, medianOf(weights.filter((weight) => weight > 0)));
}

/** Subtracts bin levels, interpolated linearly between bin centres. */
function subtract(real: Float64Array, levels: Float64Array): Float64Array {
  const n = real.length;
  const flat = new Float64Array(n);
  const count = levels.length;
  for (let i = 0; i < n; i += 1) {
    const place = ((i + 0.5) * count) / n - 0.5;
    const left = Math.max(0, Math.min(count - 2, Math.floor(place)));
    const level = levels[left]! + (levels[left + 1]! - levels[left]!) * (place - left);
    flat[i] = real[i]! - level;
  }
  return flat;
}

function noiseOf(flat: Float64Array, masked: Uint8Array): number {
  const stride = Math.max(1, Math.floor(flat.length / 30_000));
  const values: number[] = [];
  for (let i = 0; i < flat.length; i += stride) if (masked[i] === 0) values.push(Math.abs(flat[i]!));
  if (values.length < 200) return roughNoise(flat);
  return Math.max(1.4826 * medianOf(values), Number.MIN_VALUE);
}
