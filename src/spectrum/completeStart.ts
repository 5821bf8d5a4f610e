import type { Raw } from './complexFrom.js';
import type { ComplexSpectrum } from './complexSpectrum.js';

/** Farther back than this the first point says nothing of what is missing. */
const missingPointsMax = 1.05;

/**
 * Gives the first point of a FID that starts at once the weight of the time it stands for: half an interval ahead of it, and what lies
 * between it and time zero behind it. Without this a fraction of a point lost before sampling rolls the baseline.
 *
 * @param raw      as transformed, the first point counted by half
 * @param firstRad first-order phase: 2 pi for each point from time zero to the first point
 * @returns the spectrum plus a constant: the transform of the first point alone
 * @source trapezoid rule with the function held constant before its first point (own derivation; Otting et al., J. Magn. Reson.
 *   1986, 66, 187 for the half)
 */
export function completeStart({ spectrum, firstPoint, turnsThrough }: Raw, firstRad: number): ComplexSpectrum {
  const missing = firstRad / (2 * Math.PI);
  if (!firstPoint || turnsThrough || missing < -0.5 || missing > missingPointsMax) return spectrum;
  const [re, im] = [missing * firstPoint.real, missing * firstPoint.imag];
  return {
    real: spectrum.real.map((value) => value + re),
    imag: spectrum.imag.map((value) => value + im),
    stepHz: spectrum.stepHz,
  };
}
