import type { ComplexSpectrum } from './complexSpectrum.js';
import { medianOf } from './medianOf.js';

const prominenceOverNoise = 8;
const prominenceShare = 0.05;

/** A maximum of the magnitude: phase does not matter here. */
export interface Peak {
  /** Fractional index. */
  readonly index: number;
  readonly magnitude: number;
  /** Full width at half height of the Lorentzian through the top, points. */
  readonly widthPoints: number;
}

/**
 * Finds the maxima of the magnitude spectrum, strongest first. Position and width come from 1/|S|^2, which is a parabola for a
 * Lorentzian whatever its phase.
 *
 * @param spectrum shape (n)
 * @param countMax most peaks to return
 * @param level    least magnitude over the rms noise of the magnitude
 * @param pointsPerIndependent zero filling, for the noise
 * @returns peaks by falling magnitude, and the noise: rms of one quadrature in quiet places
 * @source |S|^2 = A^2 / ((w/2)^2 + (x - x0)^2)
 */
export function findPeaks(
  spectrum: ComplexSpectrum,
  countMax: number,
  level: number,
  pointsPerIndependent: number,
): { peaks: Peak[]; noise: number } {
  const { real, imag } = spectrum;
  const n = real.length;
  const power = new Float64Array(n);
  for (let i = 0; i < n; i += 1) power[i] = real[i]! ** 2 + imag[i]! ** 2;
  const noise = quietNoise(spectrum, pointsPerIndependent);
  const peaks = prominentTops(power, noise, level).map((i) => topOf(power, i));
  peaks.sort((a, b) => b.magnitude - a.magnitude || a.index - b.index);
  return { peaks: peaks.slice(0, countMax), noise };
}

/**
 * Maxima that stand out of the valleys on both sides: by several times the noise, and by a share of their own height, so that
 * ripples on the tail of a giant line are no lines.
 */
function prominentTops(power: Float64Array, noise: number, level: number): number[] {
  const tops: number[] = [];
  let isRising = true;
  let [top, topAt, valley] = [0, 0, Number.POSITIVE_INFINITY];
  for (let i = 2; i < power.length - 2; i += 1) {
    const size = Math.sqrt(power[i]!);
    if (isRising) {
      if (size > top) [top, topAt] = [size, i];
      else if (size < top - Math.max(prominenceOverNoise * noise, prominenceShare * top)) {
        if (top > level * noise && topAt > 2) tops.push(topAt);
        [isRising, valley] = [false, size];
      }
    } else if (size < valley) valley = size;
    else if (size > valley + Math.max(prominenceOverNoise * noise, prominenceShare * valley)) {
      [isRising, top, topAt] = [true, size, i];
    }
  }
  return tops;
}

/** Spacing, in independent points, at which noise under any usual window is hardly alike, and what that likeness takes away. */
const spacing = 6;
const differenceVariance = 1.35;

/**
 * Quadrature noise from second differences in the quietest of 64 sections: blind to the tails of giants and to baselines. The median
 * power of complex noise is 2 ln 2 times the variance of a quadrature.
 */
function quietNoise({ real, imag }: ComplexSpectrum, pointsPerIndependent: number): number {
  const n = real.length;
  const sections = 64;
  const length = Math.floor(n / sections);
  const reach = Math.min(Math.floor(n / 16), Math.max(2, Math.round(spacing * pointsPerIndependent)));
  const stride = Math.max(1, Math.floor(length / 256));
  const medians = Array.from({ length: sections }, (_, section) => {
    const values: number[] = [];
    for (let k = 0; k < length; k += stride) {
      const i = Math.max(reach, Math.min(n - 1 - reach, section * length + k));
      const x = real[i]! - (real[i - reach]! + real[i + reach]!) / 2;
      const y = imag[i]! - (imag[i - reach]! + imag[i + reach]!) / 2;
      values.push(x * x + y * y);
    }
    return medianOf(values);
  }).sort((a, b) => a - b);
  const quiet = medians[sections / 8]!;
  return Math.sqrt(Math.max(quiet / differenceVariance, Number.MIN_VALUE) / (2 * Math.LN2));
}

function topOf(power: Float64Array, i: number): Peak {
  const [left, middle, right] = [1 / power[i - 1]!, 1 / power[i]!, 1 / power[i + 1]!];
  const curvature = (left + right) / 2 - middle;
  if (!(curvature > 0)) return { index: i, magnitude: Math.sqrt(power[i]!), widthPoints: 2 };
  const offset = Math.max(-0.5, Math.min(0.5, (left - right) / (4 * curvature)));
  const least = Math.max(middle - curvature * offset * offset, middle * 0.25);
  return { index: i + offset, magnitude: 1 / Math.sqrt(least), widthPoints: 2 * Math.sqrt(least / curvature) };
}
