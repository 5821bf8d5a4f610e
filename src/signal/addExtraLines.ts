import { fitRegion } from './fitRegion.js';
import type { FittedRegion } from './fitRegions.js';
import { withComponents } from './lineComponents.js';
import type { Parameter, RegionFit, RegionModel, Term } from './regionModel.js';
import { searchLeftOver } from './searchLeftOver.js';
import { sticksOf } from './tailsOf.js';

/** A line that the fit had to add because no declared signal explains it. */
export const extraPrefix = '(left over ';

/** Standard uncertainties that a line must stand out by: among some hundred places noise alone gets there in 1 search of 500. */
const scoreMin = 4.2;
const extrasMax = 4;
/** Lines this close to a declared one still lie under the signal. */
const aroundWidths = 6;
/** Closer to a singlet than this a line cannot be told from the singlet's own shape. */
const hiddenWidths = 0.7;
/** Within this of another line a faulty line shape may ask for a line that is not there. */
const nearWidths = 3;
const explainedMin = 0.7;
/** Least share of the region's area, and in units of the relative misfit far from and near to other lines. */
const shareLeast = 0.006;
const farMisfits = 2;
const nearMisfits = 10;

/**
 * Adds lines where a fitted region leaves something over, one at a time and each refitted with all the rest, until nothing more
 * stands out.
 *
 * @param misfit relative misfit of the line shape: lines that small beside others are faults of the shape, not findings
 * @returns the region with its final fit; terms of extra lines have keys that begin with `extraPrefix`
 * @source  forward selection by score test; see `searchLeftOver`
 */
export function addExtraLines(fitted: FittedRegion, misfit: number): FittedRegion {
  let { fit } = fitted;
  for (let extra = 0; extra < extrasMax; extra += 1) {
    const lines = sticksOf(fit);
    if (lines.length === 0) break;
    const widthHz = narrowest(lines.map((line) => line.widthHz));
    const highHz = Math.max(...lines.map((line) => line.shiftHz)) + aroundWidths * widthHz;
    const lowHz = Math.min(...lines.map((line) => line.shiftHz)) - aroundWidths * widthHz;
    const total = fit.areas.reduce((sum, area) => sum + Math.max(0, area), 0);
    const areaMin = Math.max(shareLeast, farMisfits * misfit) * total;
    const forbidden = lines.filter(({ key }) => isSingle(fit.model, key)).map(({ shiftHz }) => shiftHz);
    const isAllowed = (shiftHz: number) => forbidden.every((place) => Math.abs(place - shiftHz) >= hiddenWidths * widthHz);
    const candidate = searchLeftOver(fitted.window, fit, { lowHz, highHz, isAllowed }, widthHz, areaMin);
    if (candidate === undefined || candidate.score < scoreMin) break;
    const next = fitRegion(fitted.window, withExtra(fit.model, fit.values, candidate.shiftHz, widthHz, extra));
    const area = next.areas[next.areas.length - 1]!;
    const index = next.areas.length - 1;
    const u = Math.sqrt(next.covarianceOf()[index * next.size + index]!);
    if (!(area > 3 * u && area > areaMin) || fit.cost - next.cost < scoreMin ** 2 - 4) break;
    const place = next.values[next.model.terms[index]!.shift]!;
    const isNear = lines.some(({ shiftHz }) => Math.abs(shiftHz - place) < nearWidths * widthHz);
    if (isNear && (area < nearMisfits * misfit * total || !explainsMost(fit, next))) break;
    fit = next;
  }
  return fit === fitted.fit ? fitted : { ...fitted, fit };
}

/** Whether a new line explains most of what was left over: a fault of the shape is only shifted about by it. */
function explainsMost(before: RegionFit, after: RegionFit): boolean {
  // Chi-square scatters by sqrt(2 n) by itself: that part of the excess no line need explain.
  const count = before.whitened.length;
  const excess = before.chiSquare - count - 2.5 * Math.sqrt(2 * count);
  return excess < 0 || before.chiSquare - after.chiSquare > explainedMin * excess;
}

/** Whether a declared pattern is one line only: then a line under it cannot be told from its shape. */
function isSingle(model: RegionModel, key: string): boolean {
  const term = model.terms.find((own) => own.key === key);
  return (
    !key.startsWith(extraPrefix) && term !== undefined && term.lines.filter(({ component = 0 }) => component === 0).length === 1
  );
}

function withExtra(model: RegionModel, values: Float64Array, shiftHz: number, widthHz: number, extra: number): RegionModel {
  const started = model.parameters.map((parameter, k): Parameter => ({ ...parameter, start: values[k]! }));
  const reach = 0.6 * widthHz;
  const shift = started.length;
  const own: Parameter = {
    kind: 'shift',
    start: shiftHz,
    mean: shiftHz,
    sigma: 4 * widthHz,
    low: shiftHz - reach,
    high: shiftHz + reach,
  };
  const first = model.terms[0]!;
  const term: Term = {
    key: `${extraPrefix}${extra + 1})`,
    lines: withComponents([{ offsetHz: 0, share: 1, perCoupling: [] }], model.components),
    shift,
    widths: first.widths.slice(0, 1),
    phase: first.phase,
    couplings: [],
  };
  return { ...model, terms: [...model.terms, term], parameters: [...started, own] };
}

function narrowest(widths: readonly number[]): number {
  return widths.reduce((least, width) => Math.min(least, width), Number.POSITIVE_INFINITY);
}
