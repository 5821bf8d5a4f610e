import type { FittedRegion } from './fitRegions.js';
import { choleskyFactor, choleskyInverse } from './solveSymmetric.js';

/**
 * Area of one term with its standard uncertainty, and the uncertainty that a zero area would have.
 *
 * u: covariance of the whole fit with correlated noise, widened by the lack of fit when chi-square says so.
 * u0: only areas and baseline free, for where nothing is there no width or shift can be fitted.
 *
 * @param t index of the term
 * @returns units of the data x Hz
 * @source  shared formulas, sections 9 and 10 (ICH Q2: detection 3.3 u0, quantitation 10 u0)
 */
export function areaOf({ fit, window }: FittedRegion, t: number): { area: number; u: number; u0: number } {
  const { covariance, size, areas, model } = fit;
  const linear = model.terms.length + 2;
  const degrees = Math.max(1, fit.whitened.length - size);
  const reduced = fit.chiSquare / degrees;
  // Chi-square scatters by sqrt(2 / degrees) itself: only what lies beyond two of that is lack of fit.
  const lack = Math.max(1, reduced - 2 * Math.sqrt(2 / degrees));
  const gram = new Float64Array(linear * linear);
  for (let i = 0; i < linear; i += 1) {
    for (let j = 0; j < linear; j += 1) {
      let sum = 0;
      const a = fit.columns[i]!;
      const b = fit.columns[j]!;
      for (let k = 0; k < a.length; k += 1) sum += a[k]! * b[k]!;
      gram[i * linear + j] = sum;
    }
  }
  const priorWeight = 1 / window.baselineU ** 2;
  for (let i = linear - 2; i < linear; i += 1) gram[i * linear + i] = gram[i * linear + i]! + priorWeight;
  const inverse = choleskyInverse(choleskyFactor(gram, linear), linear);
  return {
    area: areas[t]!,
    u: Math.sqrt(Math.max(0, covariance[t * size + t]!) * lack),
    u0: Math.sqrt(Math.max(0, inverse[t * linear + t]!)),
  };
}
