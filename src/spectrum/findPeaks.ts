import type { ComplexSpectrum } from './complexSpectrum.js';
import { medianOf } from './medianOf.js';

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
 * @returns peaks by falling magnitude, and the noise: rms of one quadrature in quiet places
 * @source |S|^2 = A^2 / ((w/2)^2 + (x - x0)^2)
 */
export function findPeaks(spectrum: ComplexSpectrum, countMax: number, level: number): { peaks: Peak[]; noise: number } {
  const { real, imag } = spectrum;
  const n = real.length;
  const power = new Float64Array(n);
  for (let i = 0; i < n; i += 1) power[i] = real[i]! ** 2 + imag[i]! ** 2;
  const noise = quietNoise(power);
  const least = (level * noise) ** 2;
  const peaks: Peak[] = [];
  for (let i = 2; i < n - 2; i += 1) {
    const here = power[i]!;
    if (here < least || here < power[i - 1]! || here <= power[i + 1]! || here < power[i - 2]! || here <= power[i + 2]!) continue;
    peaks.push(topOf(power, i));
  }
  peaks.sort((a, b) => b.magnitude - a.magnitude || a.index - b.index);
  return { peaks: peaks.slice(0, countMax), noise };
}

/** Quadrature noise from the quietest quarter of 64 sections: the median power of complex noise is 2 ln 2 times its variance. */
function quietNoise(power: Float64Array): number {
  const sections = 64;
  const length = Math.floor(power.length / sections);
  const stride = Math.max(1, Math.floor(length / 256));
  const medians = Array.from({ length: sections }, (_, section) => {
    const values: number[] = [];
    for (let k = 0; k < length; k += stride) values.push(power[section * length + k]!);
    return medianOf(values);
  }).sort((a, b) => a - b);
  const quiet = medians[sections / 8]!;
  return Math.sqrt(Math.max(quiet, Number.MIN_VALUE) / (2 * Math.LN2));
}

function topOf(power: Float64Array, i: number): Peak {
  const [left, middle, right] = [1 / power[i - 1]!, 1 / power[i]!, 1 / power[i + 1]!];
  const curvature = (left + right) / 2 - middle;
  if (!(curvature > 0)) return { index: i, magnitude: Math.sqrt(power[i]!), widthPoints: 2 };
  const offset = Math.max(-0.5, Math.min(0.5, (left - right) / (4 * curvature)));
  const least = Math.max(middle - curvature * offset * offset, middle * 0.25);
  return { index: i + offset, magnitude: 1 / Math.sqrt(least), widthPoints: 2 * Math.sqrt(least / curvature) };
}
