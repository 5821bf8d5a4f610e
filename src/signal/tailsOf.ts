import type { Spectrum } from '../spectrum/spectrum.js';
import type { FittedRegion } from './fitRegions.js';
import type { RegionFit } from './regionModel.js';

/**
 * What the lines of fitted regions add at the points of a window, far tails included.
 *
 * @returns shape (to - from), units of the data
 * @source  Lorentzian with its dispersive share (see `addTerm`); the Gaussian part has no tail and is drawn as it is
 */
export function tailsOf(
  spectrum: Spectrum,
  from: number,
  to: number,
  others: readonly Pick<FittedRegion, 'fit'>[],
): Float64Array {
  const sum = new Float64Array(to - from);
  const firstHz = spectrum.firstPpm * spectrum.observeMhz - from * spectrum.stepHz;
  for (const { fit } of others) for (const line of linesOfFit(fit)) addLine(sum, line, firstHz, spectrum.stepHz);
  return sum;
}

export interface FittedLine {
  readonly key: string;
  readonly shiftHz: number;
  readonly area: number;
  readonly widthHz: number;
  readonly phase: number;
  readonly lorentzShare: number;
}

/** Every line of a fit, as placed. */
export function linesOfFit(fit: RegionFit): FittedLine[] {
  const { model, values, areas } = fit;
  return model.terms.flatMap((term, t) => {
    const widthHz = Math.exp(term.widths.reduce((sum, index) => sum + values[index]!, 0));
    const shared = { key: term.key, widthHz, phase: values[term.phase]!, lorentzShare: values[model.lorentzShare]! };
    return term.lines.map(({ offsetHz, share, perCoupling }) => {
      const moved = perCoupling.reduce((sum, m, k) => sum + m * values[term.couplings[k]!]!, 0);
      return { ...shared, shiftHz: values[term.shift]! + offsetHz + moved, area: areas[t]! * share };
    });
  });
}

function addLine(sum: Float64Array, line: FittedLine, firstHz: number, stepHz: number): void {
  const perWidth = 2 / line.widthHz;
  const scale = (2 * line.area) / (Math.PI * line.widthHz);
  const gauss = (2 * line.area * Math.sqrt(Math.LN2 / Math.PI)) / line.widthHz;
  const cosine = Math.cos(line.phase);
  const sine = Math.sin(line.phase);
  for (let i = 0; i < sum.length; i += 1) {
    const u = (firstHz - i * stepHz - line.shiftHz) * perWidth;
    const q = scale / (1 + u * u);
    const bell = line.lorentzShare < 1 && u * u < 60 ? (1 - line.lorentzShare) * gauss * Math.exp(-Math.LN2 * u * u) : 0;
    sum[i] = sum[i]! + cosine * (line.lorentzShare * q + bell) + sine * q * u;
  }
}
