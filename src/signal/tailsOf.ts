import type { Spectrum } from '../spectrum/spectrum.js';
import { addLineValue, type PlacedLine } from './addLineValue.js';
import type { FittedRegion } from './fitRegions.js';
import type { RegionFit } from './regionModel.js';

/**
 * What the lines of fitted regions add at the points of a window, far tails included.
 *
 * @returns shape (to - from), units of the data
 * @source  see `addTerm`
 */
export function tailsOf(
  spectrum: Spectrum,
  from: number,
  to: number,
  others: readonly Pick<FittedRegion, 'fit'>[],
): Float64Array {
  const { firstPpm, observeMhz, stepHz, acquisitionS } = spectrum;
  const sum = new Float64Array(to - from);
  const axis = {
    firstHz: firstPpm * observeMhz - from * stepHz,
    stepHz,
    ...(acquisitionS !== undefined ? { acquisitionS } : {}),
  };
  for (const { fit } of others) for (const line of linesOfFit(fit)) addLineValue(sum, line, axis);
  return sum;
}

export interface FittedLine extends PlacedLine {
  readonly key: string;
  readonly component: number;
  readonly componentShare: number;
}

/** Every line of a fit, as placed. */
export function linesOfFit(fit: RegionFit): FittedLine[] {
  const { model, values, areas } = fit;
  return model.terms.flatMap((term, t) => {
    const widthHz = Math.exp(term.widths.reduce((sum, index) => sum + values[index]!, 0));
    const shared = { key: term.key, widthHz, phase: values[term.phase]!, lorentzShare: values[model.lorentzShare]! };
    return term.lines.map(({ offsetHz, share, perCoupling, extraWidthHz = 0, component = 0, componentShare = 1 }) => {
      const moved = perCoupling.reduce((sum, m, k) => sum + m * values[term.couplings[k]!]!, 0);
      const shiftHz = values[term.shift]! + offsetHz + moved;
      return { ...shared, shiftHz, area: areas[t]! * share, widthHz: widthHz + extraWidthHz, component, componentShare };
    });
  });
}

/** The lines of a fit as a chemist counts them: each once, whatever components draw it. */
export function sticksOf(fit: RegionFit): FittedLine[] {
  return linesOfFit(fit)
    .filter(({ component }) => component === 0)
    .map((line) => ({ ...line, area: line.area / line.componentShare }));
}
