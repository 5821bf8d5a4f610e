import type { Line } from '../pattern/pattern.js';
import type { BinnedSpectrum } from './binSpectrum.js';
import type { FittedRegion } from './fitRegions.js';
import { lorentzTemplate } from './lorentzTemplate.js';
import { tailsOf } from './tailsOf.js';

/** The area of a known pattern at a known place. */
export interface TemplateFit {
  /** Arbitrary units x Hz, all nuclei of the signal. */
  readonly area: number;
  readonly u: number;
  readonly shiftPpm: number;
  /** Declared signals stand so close that their model decides what is left. */
  readonly isCrowded: boolean;
}

const searchPpm = 0.012;
const reachWidths = 5;

/**
 * Fits the area of a pattern of Lorentzians near its published shift to what the declared signals leave over, with a local level.
 *
 * @param regions what is explained already
 * @param widthHz full line width
 * @returns undefined when the place lies outside the spectrum
 * @source linear least squares with the noise's autocorrelation; the level is the mean of the flanks
 */
export function fitTemplate(
  spectrum: BinnedSpectrum,
  regions: readonly FittedRegion[],
  shiftPpm: number,
  lines: readonly Line[],
  widthHz: number,
): TemplateFit | undefined {
  const { firstPpm, stepPpm, stepHz, real } = spectrum;
  const halfPoints = Math.ceil(
    (Math.max(...lines.map(({ offsetHz }) => Math.abs(offsetHz))) + reachWidths * widthHz) / stepHz + searchPpm / stepPpm,
  );
  const centre = Math.round((firstPpm - shiftPpm) / stepPpm);
  const [from, to] = [centre - halfPoints, centre + halfPoints + 1];
  if (from < 0 || to > real.length) return undefined;
  const model = tailsOf(spectrum, from, to, regions);
  const rest = new Float64Array(to - from);
  let tallest = 0;
  for (let i = 0; i < rest.length; i += 1) {
    rest[i] = real[from + i]! - model[i]!;
    tallest = Math.max(tallest, model[i]!);
  }
  let best: { area: number; u: number; move: number; score: number } | undefined;
  const step = Math.max(1, Math.round(widthHz / 4 / stepHz));
  const reach = Math.round(searchPpm / stepPpm);
  for (let move = -reach; move <= reach; move += step) {
    const template = lorentzTemplate(rest.length, (firstPpm - shiftPpm) / stepPpm - from + move, lines, widthHz, stepHz);
    const fit = amplitudeOf(rest, template, spectrum);
    const score = fit.area / fit.u - 0.5 * (move / Math.max(1, reach)) ** 2;
    if (!best || score > best.score) best = { ...fit, move, score };
  }
  if (!best) return undefined;
  // A hundredth of what is explained nearby may be the line shape's own error.
  const modelU = 0.01 * tallest * widthHz * (Math.PI / 2);
  const satelliteU = satelliteArea(spectrum, regions, centre, widthHz);
  const foreignU = Math.hypot(modelU, satelliteU);
  const isCrowded = foreignU > 0.5 * best.u && foreignU > 0.15 * Math.abs(best.area);
  return { area: best.area, u: Math.hypot(best.u, foreignU), shiftPpm: shiftPpm - best.move * stepPpm, isCrowded };
}

/** What a 13C satellite of a strong line could put here: a proton on carbon has 0.54 % of its line half a J(C,H) away on either side. */
function satelliteArea(spectrum: BinnedSpectrum, regions: readonly FittedRegion[], centre: number, widthHz: number): number {
  let tallest = 0;
  // J(C,H)/2: sp3 carbon 115 to 140 Hz, sp2 carbon 152 to 172 Hz (common practice).
  const places = [58, 76].flatMap((low, k) => [-1, 1].map((side) => ({ side, low, high: [70, 86][k]! })));
  for (const { side, low: lowHz, high: highHz } of places) {
    const [one, other] = [
      centre + Math.round((side * lowHz) / spectrum.stepHz),
      centre + Math.round((side * highHz) / spectrum.stepHz),
    ];
    const [from, to] = [Math.min(one, other), Math.max(one, other)];
    const [low, high] = [Math.max(0, from), Math.min(spectrum.real.length, to)];
    if (high - low < 2) continue;
    for (const value of tailsOf(spectrum, low, high, regions)) tallest = Math.max(tallest, value);
  }
  return 0.0054 * tallest * widthHz * (Math.PI / 2);
}

function amplitudeOf(rest: Float64Array, template: Float64Array, spectrum: BinnedSpectrum): { area: number; u: number } {
  const n = rest.length;
  let [meanT, meanR] = [0, 0];
  for (let i = 0; i < n; i += 1) {
    meanT += template[i]! / n;
    meanR += rest[i]! / n;
  }
  let [tt, tr] = [0, 0];
  for (let i = 0; i < n; i += 1) {
    const t = template[i]! - meanT;
    tt += t * t;
    tr += t * (rest[i]! - meanR);
  }
  let variance = 0;
  for (let lag = 0; lag < spectrum.noiseCorrelation.length && lag < n; lag += 1) {
    let sum = 0;
    for (let i = lag; i < n; i += 1) sum += (template[i]! - meanT) * (template[i - lag]! - meanT);
    variance += (lag === 0 ? 1 : 2) * spectrum.noiseCorrelation[lag]! * sum;
  }
  return { area: tr / tt, u: (spectrum.noise * Math.sqrt(Math.max(variance, tt))) / tt };
}
