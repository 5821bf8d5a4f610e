import { addLineValue, type PlacedLine } from './addLineValue.js';
import type { TermAxis } from './addTerm.js';
import type { BinnedSpectrum } from './binSpectrum.js';
import type { FittedRegion } from './fitRegions.js';
import type { RegionFit } from './regionModel.js';

/**
 * What the lines of fitted regions add at the points of a window, far tails included.
 *
 * @returns shape (to - from), units of the data
 * @source  see `addTerm`
 */
export function tailsOf(
  spectrum: BinnedSpectrum,
  from: number,
  to: number,
  others: readonly Pick<FittedRegion, 'fit'>[],
): Float64Array {
  const sum = new Float64Array(to - from);
  for (const { fit } of others) {
    for (const line of linesOfFit(fit)) {
      if (line.area === 0) continue;
      const [first, last] = reachOf(spectrum, line);
      const start = Math.max(from, first);
      const end = Math.min(to, last);
      if (end > start) addLineValue(sum.subarray(start - from, end - from), line, spectrumAxis(spectrum, start));
    }
  }
  return sum;
}

/** The axis of a spectrum from one of its points on. */
export function spectrumAxis(spectrum: BinnedSpectrum, from: number): TermAxis {
  const { firstPpm, observeMhz, stepHz, acquisitionS, blur, rippleFactor } = spectrum;
  const firstHz = firstPpm * observeMhz - from * stepHz;
  return { firstHz, stepHz, blur, rippleFactor, ...(acquisitionS !== undefined ? { acquisitionS } : {}) };
}

/** Part of the noise below which the tail of a line is left out. */
const tailNoise = 0.004;

/** First and behind the last index that a line still reaches: by its tail A W / (2 pi d^2), its dispersion and its ripple A / (pi d). */
function reachOf(spectrum: BinnedSpectrum, line: FittedLine): readonly [number, number] {
  const { firstPpm, observeMhz, stepHz, acquisitionS, rippleFactor, noise } = spectrum;
  const area = Math.abs(line.area);
  const least = tailNoise * noise;
  const cut = acquisitionS === undefined ? 0 : Math.exp(-Math.PI * line.widthHz * acquisitionS) * Math.abs(rippleFactor);
  const reachHz = Math.max(
    20 * line.widthHz,
    Math.sqrt((area * line.widthHz) / (2 * Math.PI * least)),
    (area * (Math.abs(Math.sin(line.phase)) + cut)) / (Math.PI * least),
  );
  const centre = (firstPpm * observeMhz - line.shiftHz) / stepHz;
  return [Math.floor(centre - reachHz / stepHz), Math.ceil(centre + reachHz / stepHz) + 1];
}

export interface FittedLine extends PlacedLine {
  readonly key: string;
  readonly component: number;
  readonly componentShare: number;
}

const placed = new WeakMap<RegionFit, readonly FittedLine[]>();

/** Every line of a fit, as placed. */
export function linesOfFit(fit: RegionFit): readonly FittedLine[] {
  const known = placed.get(fit);
  if (known !== undefined) return known;
  const lines = placeLines(fit);
  placed.set(fit, lines);
  return lines;
}

function placeLines(fit: RegionFit): FittedLine[] {
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
