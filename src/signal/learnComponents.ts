import type { BinnedSpectrum } from './binSpectrum.js';
import type { SharedShape } from './buildRegionModel.js';
import { fitRegion } from './fitRegion.js';
import { type FittedRegion, fitRegions } from './fitRegions.js';
import { worstMisfit } from './learnShape.js';
import type { LineComponent } from './lineComponents.js';
import type { Located } from './locateSignals.js';
import type { Parameter, RegionFit, RegionModel, RegionWindow, Term } from './regionModel.js';
import type { Whitening } from './whiteningFilter.js';

const componentsMax = 5;
/** A component must explain this share of what is left, or it only fits noise. */
const gainShareMin = 0.15;
/** Mean fall of the logarithm of chi-square on the other signals: less may be chance. */
const scoreMin = 0.1;

/**
 * Learns the components of the shared line shape from one signal and checks them on the others: an impurity beside the one
 * is no shape for the others.
 *
 * @param fits strong signals fitted with plain Lorentzians
 * @returns the shape that fits all of them best, or undefined when none does better than a Lorentzian
 * @source  forward selection; every candidate is a copy of the whole pattern with its own place and width
 */
export function learnComponents(
  spectrum: BinnedSpectrum,
  fits: readonly FittedRegion[],
  located: ReadonlyMap<string, Located>,
  plain: SharedShape,
  whitening: Whitening,
): SharedShape | undefined {
  const alone = fits.filter(({ region }) => region.targets.length === 1);
  let best: { shape: SharedShape; score: number } | undefined;
  for (const teacher of alone.slice(0, 2)) {
    const { components, widthHz } = componentsOf(teacher);
    if (components.length === 1) continue;
    const trial: SharedShape = { ...plain, components, widthHz };
    const pupils = fits.filter((fitted) => fitted !== teacher);
    const regions = pupils.map(({ region }) => region);
    const taught = fitRegions(spectrum, regions, located, trial, whitening);
    const before = pupils.reduce((sum, fitted) => sum + Math.log(fitted.fit.chiSquare), 0);
    const after = taught.reduce((sum, fitted) => sum + Math.log(fitted.fit.chiSquare), 0);
    const score = (before - after) / Math.max(1, pupils.length);
    const misfit = Math.max(0, ...taught.map(worstMisfit));
    if (score > scoreMin && score > (best?.score ?? 0)) best = { shape: { ...trial, misfit }, score };
  }
  return best?.shape;
}

function componentsOf({ window, fit }: FittedRegion): { components: LineComponent[]; widthHz: number } {
  let current = fit;
  for (let count = 1; count < componentsMax; count += 1) {
    const next = bestAddition(window, current);
    const noise = window.data.length;
    if (next === undefined || (current.chiSquare - next.chiSquare) / Math.max(1, current.chiSquare - noise) < gainShareMin) break;
    current = next;
  }
  return asComponents(current);
}

/** Tries a copy of the pattern to either side and a wide one. */
function bestAddition(window: RegionWindow, fit: RegionFit): RegionFit | undefined {
  const base = fit.model.terms[0]!;
  const widthHz = Math.exp(base.widths.reduce((sum, index) => sum + fit.values[index]!, 0));
  let best: RegionFit | undefined;
  for (const [offset, ratio] of [
    [0.5, 1],
    [-0.5, 1],
    [1.3, 1],
    [-1.3, 1],
    [0, 2.5],
  ] as const) {
    const trial = fitRegion(window, withCopy(fit, offset * widthHz, Math.log(ratio), widthHz));
    // A negative part of a line is no line.
    if (trial.areas.every((area) => area > 0) && trial.chiSquare < (best?.chiSquare ?? fit.chiSquare)) best = trial;
  }
  return best;
}

function withCopy(fit: RegionFit, offsetHz: number, logRatio: number, widthHz: number): RegionModel {
  const { model, values } = fit;
  const parameters = model.parameters.map((parameter, k): Parameter => ({ ...parameter, start: values[k]! }));
  const base = model.terms[0]!;
  const centre = values[base.shift]!;
  const reach = 4 * widthHz;
  parameters.push({
    kind: 'shift',
    start: centre + offsetHz,
    mean: centre,
    sigma: 2 * widthHz,
    low: centre - reach,
    high: centre + reach,
  });
  parameters.push({ kind: 'log-width', start: logRatio, mean: 0, sigma: 0.8, low: -0.7, high: 2.5 });
  const shift = parameters.length - 2;
  const copy: Term = {
    ...base,
    key: `(component ${model.terms.length})`,
    shift,
    widths: [base.widths[0]!, parameters.length - 1],
  };
  return { ...model, parameters, terms: [...model.terms, copy] };
}

/** Main component first: the one that holds most; offsets and widths count from it. */
function asComponents(fit: RegionFit): { components: LineComponent[]; widthHz: number } {
  const total = fit.areas.reduce((sum, area) => sum + area, 0);
  const parts = fit.model.terms.map((term, t) => ({
    shiftHz: fit.values[term.shift]!,
    widthHz: Math.exp(term.widths.reduce((sum, index) => sum + fit.values[index]!, 0)),
    share: fit.areas[t]! / total,
  }));
  const narrowest = Math.min(...parts.map(({ widthHz }) => widthHz));
  const main = parts.reduce((a, b) => (b.share / b.widthHz > a.share / a.widthHz ? b : a));
  const ordered = [main, ...parts.filter((part) => part !== main)];
  const components = ordered.map(({ shiftHz, widthHz, share }) => ({
    offsetHz: shiftHz - main.shiftHz,
    extraWidthHz: widthHz - narrowest,
    share,
  }));
  return { components, widthHz: narrowest };
}
