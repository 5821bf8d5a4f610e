import { addLineValue } from './addLineValue.js';
import { couplingReachHz, type Neighbourhood } from './neighbourhood.js';
import { type Peak, pickPeaks } from './pickPeaks.js';
import { linesOfFit } from './tailsOf.js';

/** Against the tallest line of the signal: smaller ones make no other pattern. */
const shareMin = 0.04;
const scoreMin = 6;

/**
 * The lines around a signal, and those among them that its declared pattern does not explain.
 *
 * @returns peaks of the whole trace that follow each other within the largest coupling, and unexplained ones
 * @source  see `pickPeaks`
 */
export function strangeLines(near: Neighbourhood): { readonly all: readonly Peak[]; readonly strange: readonly Peak[] } {
  const { window, trace, widthHz, fit } = near;
  // Least-squares area of one line: sigma sqrt(pi W dx), and half as much again for the sharpened filter.
  const areaU = 1.5 * window.noise * Math.sqrt(Math.PI * widthHz * window.stepHz);
  const found = pickPeaks(trace, window.firstHz, window.stepHz, widthHz, scoreMin * areaU);
  const lines = linesOfFit(fit);
  const all = clusterOf(found, lines.reduce((sum, line) => sum + line.shiftHz, 0) / lines.length);
  const tallest = Math.max(0, ...all.map(({ area }) => area));
  const model = new Float64Array(trace.length);
  for (const line of lines) addLineValue(model, line, window);
  const residual = trace.map((value, i) => value - model[i]!);
  const high = Math.max(...lines.map((line) => line.shiftHz)) + couplingReachHz;
  const low = Math.min(...lines.map((line) => line.shiftHz)) - couplingReachHz;
  const strange = pickPeaks(
    residual,
    window.firstHz,
    window.stepHz,
    widthHz,
    Math.max(scoreMin * areaU, shareMin * tallest),
  ).filter(({ shiftHz }) => shiftHz < high && shiftHz > low);
  return { all: all.filter(({ area }) => area > shareMin * tallest), strange };
}

/** The peaks that follow each other within the largest coupling, from the tall one nearest to the signal's place. */
function clusterOf(peaks: readonly Peak[], centreHz: number): Peak[] {
  const near = peaks.filter(({ shiftHz }) => Math.abs(shiftHz - centreHz) < couplingReachHz);
  const tallest = Math.max(0, ...near.map(({ area }) => area));
  const tall = near.filter(({ area }) => area > 0.2 * tallest);
  if (tall.length === 0) return [];
  const start = peaks.indexOf(tall.reduce((a, b) => (Math.abs(b.shiftHz - centreHz) < Math.abs(a.shiftHz - centreHz) ? b : a)));
  const notable = peaks.filter(({ area }, index) => index === start || area > shareMin * tallest);
  let low = notable.indexOf(peaks[start]!);
  let high = low;
  while (low + 1 < notable.length && notable[low]!.shiftHz - notable[low + 1]!.shiftHz < couplingReachHz) low += 1;
  while (high > 0 && notable[high - 1]!.shiftHz - notable[high]!.shiftHz < couplingReachHz) high -= 1;
  return notable.slice(high, low + 1);
}
