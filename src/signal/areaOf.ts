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

/** Points this far from the outermost lines count as the signal's own. */
const ownWidths = 8;
/** What the residual adds is known to this share of itself. */
const correctionU = 0.2;

/**
 * Adds what the fit leaves over to the area of a signal that stands alone, where that is more than noise: the shape of a real
 * line is never quite the model's, but what stands under a lone signal is its own.
 *
 * @param lines of the signal; the residual is summed around them
 * @returns area and u with the correction, or as they came when noise explains the residual
 * @source  plain integration of the residual (derived): u(I) = sigma dx sqrt(N), and a fifth of the correction
 */
export function withResidual(
  { fit, window }: FittedRegion,
  measured: { readonly area: number; readonly u: number },
  lines: readonly { readonly shiftHz: number; readonly widthHz: number }[],
): { area: number; u: number } {
  const reach = ownWidths * lines[0]!.widthHz;
  const high = Math.max(...lines.map(({ shiftHz }) => shiftHz)) + reach;
  const low = Math.min(...lines.map(({ shiftHz }) => shiftHz)) - reach;
  const from = Math.max(0, Math.ceil((window.firstHz - high) / window.stepHz));
  const to = Math.min(window.data.length, Math.floor((window.firstHz - low) / window.stepHz) + 1);
  let sum = 0;
  for (let i = from; i < to; i += 1) sum += fit.residual[i]!;
  const correction = sum * window.stepHz;
  const noiseU = window.noise * window.stepHz * Math.sqrt(Math.max(1, to - from));
  if (Math.abs(correction) < 5 * noiseU) return { area: measured.area, u: measured.u };
  return { area: measured.area + correction, u: Math.hypot(measured.u, noiseU, correctionU * correction) };
}
