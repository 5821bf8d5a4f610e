import type { ComplexSpectrum } from './complexSpectrum.js';

/**
 * Turns a spectrum back by its phase: S x exp(-i (zero + first (i/n - 1/2))).
 *
 * @param spectrum shape (n)
 * @returns a new spectrum, in phase when the angles are right
 * @source phase model of the trade; checked against NumPy
 */
export function rotatePhase(spectrum: ComplexSpectrum, zeroRad: number, firstRad: number): ComplexSpectrum {
  const n = spectrum.real.length;
  const real = new Float64Array(n);
  const imag = new Float64Array(n);
  const start = -(zeroRad - firstRad / 2);
  let [c, s] = [Math.cos(start), Math.sin(start)];
  const [dc, ds] = [Math.cos(-firstRad / n), Math.sin(-firstRad / n)];
  for (let i = 0; i < n; i += 1) {
    const [re, im] = [spectrum.real[i]!, spectrum.imag[i]!];
    real[i] = re * c - im * s;
    imag[i] = re * s + im * c;
    const next = c * dc - s * ds;
    s = c * ds + s * dc;
    c = next;
  }
  return { real, imag, stepHz: spectrum.stepHz };
}
