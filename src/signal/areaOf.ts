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
  const { size, areas, model } = fit;
  const covariance = fit.covarianceOf();
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
/** What the sum differs from the fit by is known to this share of itself. */
const differenceU = 0.2;
/** Part of the relative misfit that may go into the area: positive and negative errors of a shape mostly cancel. */
const shapeShare = 0.3;

/**
 * Area of a signal that stands alone where the line shape is not known to the noise: the sum of the data on the flat baseline, with
 * the model used only for the tails beyond the summed points. What stands under a lone signal is its own, whatever its shape.
 *
 * @param lines     of the signal; data are summed around them
 * @param baselineU standard uncertainty of the spectrum's baseline level, units of the data
 * @param misfit    relative misfit of the line shape
 * @returns area and u; the fitted area where noise matters more than the shape
 * @source  plain integration (shared formulas, section 3), Lorentzian tails (section 4)
 */
export function summedArea(
  { fit, window }: FittedRegion,
  measured: { readonly area: number; readonly u: number },
  lines: readonly { readonly shiftHz: number; readonly widthHz: number }[],
  { baselineU, misfit }: { readonly baselineU: number; readonly misfit: number },
): { area: number; u: number } {
  const { stepHz, firstHz, data, noise } = window;
  const reach = ownWidths * lines[0]!.widthHz;
  const high = Math.max(...lines.map(({ shiftHz }) => shiftHz)) + reach;
  const low = Math.min(...lines.map(({ shiftHz }) => shiftHz)) - reach;
  const from = Math.max(0, Math.ceil((firstHz - high) / stepHz));
  const to = Math.min(data.length, Math.floor((firstHz - low) / stepHz) + 1);
  let sum = 0;
  let model = 0;
  const middle = (data.length - 1) / 2;
  for (let i = from; i < to; i += 1) {
    sum += data[i]!;
    model += fit.fit[i]! - fit.level - fit.slopePerHz * (middle - i) * stepHz;
  }
  if (!(model > 0)) return { area: measured.area, u: measured.u };
  const area = (measured.area * sum) / model;
  const noiseU = noise * stepHz * Math.sqrt(to - from);
  const difference = area - measured.area;
  const shapeU = shapeShare * misfit * area;
  if (noiseU > misfit * area) return { area: measured.area, u: Math.hypot(measured.u, shapeU) };
  return { area, u: Math.hypot(noiseU, baselineU * (to - from) * stepHz, differenceU * difference, shapeU) };
}
