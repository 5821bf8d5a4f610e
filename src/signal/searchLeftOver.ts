import { addTerm, termColumns } from './addTerm.js';
import { withComponents } from './lineComponents.js';
import { whitenColumn } from './normalEquations.js';
import type { RegionFit, RegionWindow } from './regionModel.js';

/** Where one more line would explain most of what a fit leaves over. */
export interface Candidate {
  readonly shiftHz: number;
  /** First estimate of its area. */
  readonly area: number;
  /** Area over its standard uncertainty, given everything else in the fit may give way. */
  readonly score: number;
}

const reachWidths = 5;
const stepsPerWidth = 4;

/**
 * Looks for one more line under a fitted region: at each place the gain of adding a line there, projected on what the fit
 * cannot already explain (score test), so a line that shift, width or phase could absorb counts only for the rest.
 *
 * @param lowHz, highHz where to look, on the region's axis
 * @param widthHz       width of the line sought
 * @param areaMin       places whose area estimate is smaller are passed over
 * @returns the place with the highest score, or undefined when none has a positive one
 * @source  C. R. Rao, Proc. Camb. Phil. Soc. 1948, 44, 50 (score test, from memory)
 */
export function searchLeftOver(
  window: RegionWindow,
  fit: RegionFit,
  span: { readonly lowHz: number; readonly highHz: number; readonly isAllowed?: (shiftHz: number) => boolean },
  widthHz: number,
  areaMin = 0,
): Candidate | undefined {
  const { stepHz, firstHz, filter, noise, data, trust } = window;
  const order = filter.length - 1;
  const reach = Math.min(Math.ceil((reachWidths * widthHz) / stepHz), data.length);
  const step = Math.max(1, Math.round(widthHz / (stepsPerWidth * stepHz)));
  const template = lineTemplate(window, fit, widthHz, reach, order);
  const weighed = new Float64Array(template.length);
  let best: Candidate | undefined;
  const firstIndex = Math.max(0, Math.ceil((firstHz - span.highHz) / stepHz));
  const lastIndex = Math.min(data.length - 1, Math.floor((firstHz - span.lowHz) / stepHz));
  for (let centre = firstIndex; centre <= lastIndex; centre += step) {
    // Whitened point j stands for data point j + order.
    if (span.isAllowed?.(firstHz - centre * stepHz) === false) continue;
    const offset = centre - reach - order;
    const from = Math.max(0, -offset);
    const to = Math.min(template.length, fit.whitened.length - offset);
    let energy = 0;
    let match = 0;
    for (let k = from; k < to; k += 1) {
      const value = template[k]! * (trust === undefined ? 1 : trust[k + offset + order]!);
      energy += value * value;
      match += value * fit.whitened[k + offset]!;
      weighed[k] = value;
    }
    if (match <= 0) continue;
    const left = energy - explained(fit, weighed, offset, from, to);
    if (left < 0.003 * energy) continue;
    const score = match / Math.sqrt(left);
    const area = match / left;
    if (area >= areaMin && score > (best?.score ?? 0)) best = { shiftHz: firstHz - centre * stepHz, area, score };
  }
  return noise > 0 ? best : undefined;
}

function lineTemplate(window: RegionWindow, fit: RegionFit, widthHz: number, reach: number, order: number): Float64Array {
  const columns = termColumns(2 * reach + 1 + order, 0);
  const lines = withComponents([{ offsetHz: 0, share: 1, perCoupling: [] }], fit.model.components);
  const term = { key: '', lines, shift: 0, widths: [], phase: 0, couplings: [] };
  const lorentzShare = fit.values[fit.model.lorentzShare]!;
  const state = { shiftHz: 0, widthHz, phase: 0, lorentzShare, isShareFree: false, couplings: [] };
  // The ripple of the cut depends on the exact place and is left out of a template that moves.
  addTerm(term, state, { firstHz: (reach + order) * window.stepHz, stepHz: window.stepHz }, columns);
  return whitenColumn(columns.value, window.filter, 1 / window.noise);
}

/** b^T M^-1 b with b = J^T template: how much of the template the fitted model can imitate. */
function explained(fit: RegionFit, template: Float64Array, offset: number, from: number, to: number): number {
  const n = fit.size;
  const b = new Float64Array(n);
  for (let p = 0; p < n; p += 1) {
    const column = fit.columns[p]!;
    let sum = 0;
    for (let k = from; k < to; k += 1) sum += template[k]! * column[k + offset]!;
    b[p] = sum;
  }
  let total = 0;
  for (let i = 0; i < n; i += 1) for (let j = 0; j < n; j += 1) total += b[i]! * fit.inverse[i * n + j]! * b[j]!;
  return total;
}
