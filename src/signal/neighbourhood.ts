import type { BinnedSpectrum } from './binSpectrum.js';
import { fitRegion } from './fitRegion.js';
import type { FittedRegion } from './fitRegions.js';
import type { Parameter, RegionFit } from './regionModel.js';
import { regionWindow } from './regionWindow.js';
import type { Target } from './signalTargets.js';
import { sticksOf, tailsOf } from './tailsOf.js';
import type { Whitening } from './whiteningFilter.js';

/** Wider than any coupling between protons: the lines of one multiplet follow each other within this. */
export const couplingReachHz = 22;
const marginWidths = 12;

/** One signal by itself in a window wide enough for any pattern that it might really be. */
export interface Neighbourhood extends FittedRegion {
  readonly target: Target;
  readonly widthHz: number;
  /** Relative misfit of the shared line shape. */
  readonly misfit: number;
  /** shape (points): data less every other declared signal, less the baseline of the fit. */
  readonly trace: Float64Array;
}

/**
 * Looks at one signal alone: everything else that was declared is taken off, and the window reaches as far as the lines of
 * another pattern could stand.
 *
 * @param regions every fitted region of the spectrum, declared patterns only
 * @param home    the one that holds the signal
 * @returns the signal fitted alone with its declared pattern, and its trace
 * @source  own
 */
export function neighbourhood(
  spectrum: BinnedSpectrum,
  regions: readonly FittedRegion[],
  home: FittedRegion,
  target: Target,
  { whitening, misfit }: { readonly whitening: Whitening; readonly misfit: number },
): Neighbourhood {
  const own = sticksOf(home.fit).filter(({ key }) => key === target.key);
  // A width that strained to imitate another pattern says nothing: the spectrum's own width is the better guess.
  const term = home.fit.model.terms.find(({ key }) => key === target.key)!;
  const usualHz = Math.exp(term.widths.reduce((sum, index) => sum + home.fit.model.parameters[index]!.mean, 0));
  const widthHz = Math.min(own[0]!.widthHz, usualHz);
  const firstHz = spectrum.firstPpm * spectrum.observeMhz;
  const reach = 2 * couplingReachHz + marginWidths * widthHz;
  const high = Math.max(...own.map(({ shiftHz }) => shiftHz)) + reach;
  const low = Math.min(...own.map(({ shiftHz }) => shiftHz)) - reach;
  const from = Math.min(spectrum.real.length - 3, Math.max(0, Math.floor((firstHz - high) / spectrum.stepHz)));
  const to = Math.max(from + 3, Math.min(spectrum.real.length, Math.ceil((firstHz - low) / spectrum.stepHz)));
  const others = regions.map((region) => (region === home ? { fit: withoutTerm(region.fit, target.key) } : region));
  const outside = tailsOf(spectrum, from, to, others);
  const window = regionWindow(spectrum, { from, to, whitening, misfit, widthHz, outside });
  const fit = fitRegion(window, modelOf(home.fit, target.key));
  const trace = Float64Array.from(
    window.data,
    (value, i) => value - fit.level - fit.slopePerHz * slopeHz(window.data.length, i, window.stepHz),
  );
  return {
    region: { targets: [target], from, to },
    window,
    fit,
    target,
    widthHz,
    misfit,
    trace,
  };
}

function slopeHz(points: number, index: number, stepHz: number): number {
  return ((points - 1) / 2 - index) * stepHz;
}

function withoutTerm(fit: RegionFit, key: string): RegionFit {
  return { ...fit, areas: fit.areas.map((area, t) => (fit.model.terms[t]!.key === key ? 0 : area)) };
}

function modelOf(fit: RegionFit, key: string) {
  const { model, values } = fit;
  const terms = model.terms.filter((term) => term.key === key);
  const used = new Set([
    model.lorentzShare,
    ...terms.flatMap(({ shift, widths, phase, couplings }) => [shift, phase, ...widths, ...couplings]),
  ]);
  const parameters = model.parameters.map((parameter, k): Parameter => {
    const start = parameter.kind === 'log-width' ? parameter.mean : values[k]!;
    return { ...parameter, start, sigma: used.has(k) ? parameter.sigma : 0 };
  });
  return { ...model, terms, parameters };
}
