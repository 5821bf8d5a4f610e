import { fitRegion } from './fitRegion.js';
import type { FittedRegion } from './fitRegions.js';
import type { Parameter, RegionModel, Term } from './regionModel.js';
import { searchLeftOver } from './searchLeftOver.js';
import { linesOfFit } from './tailsOf.js';

/** A line that the fit had to add because no declared signal explains it. */
export const extraPrefix = '(left over ';

/** Standard uncertainties that a line must stand out by: among some hundred places noise alone gets there in 1 search of 500. */
const scoreMin = 4.2;
const extrasMax = 4;
/** Lines this close to a declared one still lie under the signal. */
const aroundWidths = 6;

/**
 * Adds lines where a fitted region leaves something over, one at a time and each refitted with all the rest, until nothing more
 * stands out.
 *
 * @param shareMin share of the region's area below which a line is a fault of the line shape, not a finding
 * @returns the region with its final fit; terms of extra lines have keys that begin with `extraPrefix`
 * @source  forward selection by score test; see `searchLeftOver`
 */
export function addExtraLines(fitted: FittedRegion, shareMin: number): FittedRegion {
  let { fit } = fitted;
  for (let extra = 0; extra < extrasMax; extra += 1) {
    const lines = linesOfFit(fit);
    if (lines.length === 0) break;
    const widthHz = narrowest(lines.map((line) => line.widthHz));
    const highHz = Math.max(...lines.map((line) => line.shiftHz)) + aroundWidths * widthHz;
    const lowHz = Math.min(...lines.map((line) => line.shiftHz)) - aroundWidths * widthHz;
    const total = fit.areas.reduce((sum, area) => sum + Math.max(0, area), 0);
    const areaMin = shareMin * total;
    const candidate = searchLeftOver(fitted.window, fit, { lowHz, highHz }, widthHz, areaMin);
    if (candidate === undefined || candidate.score < scoreMin) break;
    const next = fitRegion(fitted.window, withExtra(fit.model, fit.values, candidate.shiftHz, widthHz, extra));
    const area = next.areas[next.areas.length - 1]!;
    const index = next.areas.length - 1;
    const u = Math.sqrt(next.covariance[index * next.size + index]!);
    if (!(area > 3 * u && area > areaMin) || fit.cost - next.cost < scoreMin ** 2 - 4) break;
    fit = next;
  }
  return fit === fitted.fit ? fitted : { ...fitted, fit };
}

function withExtra(model: RegionModel, values: Float64Array, shiftHz: number, widthHz: number, extra: number): RegionModel {
  const started = model.parameters.map((parameter, k): Parameter => ({ ...parameter, start: values[k]! }));
  const reach = 2 * widthHz;
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
    lines: [{ offsetHz: 0, share: 1, perCoupling: [] }],
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
