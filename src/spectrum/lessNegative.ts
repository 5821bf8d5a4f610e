import type { ComplexSpectrum } from './complexSpectrum.js';
import type { Peak } from './findPeaks.js';
import { type PhaseFit, wrap } from './fitPhase.js';
import { medianOf } from './medianOf.js';
import { refinePhase } from './refinePhase.js';
import { rotatePhase } from './rotatePhase.js';

/** Negative area, in units of the noise per point, below which a phase is not questioned. */
const negativeLeast = 0.02;
/** Another phase must leave this much less below zero to be taken. */
const betterShare = 0.7;
const firstReachRad = 1.5;

/**
 * Where lines are so crowded that local phases are unsure, an absorption spectrum still has nothing below zero. The phase of least
 * entropy of slope is tried beside the one from the local fits, and the one that leaves clearly less below zero is taken.
 *
 * Only for spectra without a roll from missing first points, whose baseline may dip by itself.
 *
 * @param spectrum not phased, shape (n)
 * @param peaks    maxima, strongest first
 * @param noise    rms of one quadrature
 * @param fit      phase by the local fits
 * @returns the fit, or another one in its place
 * @source non-negativity: de Brouwer, J. Magn. Reson. 2009, 201, 230; entropy: Chen et al., J. Magn. Reson. 2002, 158, 164
 */
export function lessNegative(spectrum: ComplexSpectrum, peaks: readonly Peak[], noise: number, fit: PhaseFit): PhaseFit {
  const before = negativeArea(spectrum, fit, noise);
  if (before < negativeLeast) return fit;
  const other = refinePhase(spectrum, peaks, noise, fit, firstReachRad);
  const after = negativeArea(spectrum, other, noise);
  if (!(after < betterShare * before)) return fit;
  // How far two independent ways differ where the lines are is what the phase is uncertain by.
  const n = spectrum.real.length;
  const differences = peaks.slice(0, 30).map(({ index }) => {
    const x = index / n - 0.5;
    return Math.abs(wrap(other.zeroRad - fit.zeroRad + (other.firstRad - fit.firstRad) * x));
  });
  return { ...fit, ...other, restRad: medianOf(differences) };
}

function negativeArea(spectrum: ComplexSpectrum, phase: { zeroRad: number; firstRad: number }, noise: number): number {
  const { real } = rotatePhase(spectrum, phase.zeroRad, phase.firstRad);
  const n = real.length;
  const middle = medianOf(real.filter((_, i) => i % 8 === 0));
  let sum = 0;
  for (let i = Math.floor(n * 0.03); i < n * 0.97; i += 1) sum += Math.max(0, middle - real[i]! - 4 * noise);
  return sum / noise / n;
}
