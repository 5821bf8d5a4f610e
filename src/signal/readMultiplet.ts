import type { BinnedSpectrum } from './binSpectrum.js';
import { type CandidatePattern, candidatePatterns, lettersOf } from './candidatePatterns.js';
import { fitRegion } from './fitRegion.js';
import type { Unassigned } from './measured.js';
import type { Peak } from './pickPeaks.js';
import type { Parameter, RegionFit, RegionModel, RegionWindow, Term } from './regionModel.js';
import { regionWindow } from './regionWindow.js';
import { patternLevels } from './rivalPattern.js';
import type { Whitening } from './whiteningFilter.js';

const marginWidths = 10;
const triedMax = 5;
const peaksMax = 14;
/** A pattern is named when chi-square with it is no worse than this factor times that of free lines. */
const nearlyAsGood = 1.3;

/**
 * Reads one group of lines that nothing explains: its pattern and couplings where one pattern fits as well as free lines do,
 * else a multiplet.
 *
 * @param trace shape (n) of the spectrum: what is left when all that is explained is taken off
 * @param peaks lines of the group, by descending shift
 * @returns shift of the centre, area with u, pattern, couplings
 * @source  see `candidatePatterns`, `fitRegion`
 */
export function readMultiplet(
  spectrum: BinnedSpectrum,
  trace: Float64Array,
  peaks: readonly Peak[],
  widthHz: number,
  whitening: Whitening,
): Unassigned {
  const { observeMhz, firstPpm, stepHz } = spectrum;
  const lines = [...peaks]
    .sort((a, b) => b.area - a.area)
    .slice(0, peaksMax)
    .sort((a, b) => b.shiftHz - a.shiftHz);
  const toIndex = (hz: number) => (firstPpm * observeMhz - hz) / stepHz;
  const from = Math.max(0, Math.floor(toIndex(lines[0]!.shiftHz + marginWidths * widthHz)));
  const to = Math.min(trace.length, Math.ceil(toIndex(lines.at(-1)!.shiftHz - marginWidths * widthHz)) + 1);
  const window = regionWindow({ ...spectrum, real: trace }, { from, to, whitening, misfit: 0, widthHz });
  const free = fitRegion(window, freeLines(lines, widthHz));
  const named = lines.length === 1 ? undefined : bestNamed(window, lines, widthHz, free.chiSquare);
  const fit = named?.fit ?? free;
  const n = fit.model.terms.length;
  let area = 0;
  let variance = 0;
  let moment = 0;
  for (let i = 0; i < n; i += 1) {
    area += fit.areas[i]!;
    moment += fit.areas[i]! * fit.values[fit.model.terms[i]!.shift]!;
    for (let j = 0; j < n; j += 1) variance += fit.covarianceOf()[i * fit.size + j]!;
  }
  const couplingsHz = named?.candidate.couplingsHz.map(
    (j, k) => Math.round((j + fit.values[fit.model.terms[0]!.couplings[k]!]!) * 10) / 10,
  );
  const width = Math.exp(fit.values[fit.model.terms[0]!.widths[0]!]!);
  return {
    shiftPpm: (area > 0 ? moment / area : lines[0]!.shiftHz) / observeMhz,
    area,
    u: Math.sqrt(Math.max(0, variance)),
    pattern: lines.length === 1 ? 's' : (named && lettersOf(named.candidate.neighbours)) || 'm',
    ...(couplingsHz && couplingsHz.length > 0 ? { couplingsHz } : {}),
    widthHz: Math.round(width * 1000) / 1000,
  };
}

function bestNamed(window: RegionWindow, peaks: readonly Peak[], widthHz: number, freeChiSquare: number) {
  const seen = new Set<string>();
  let best: { fit: RegionFit; candidate: CandidatePattern } | undefined;
  for (const candidate of candidatePatterns(peaks, [], widthHz)) {
    const letters = lettersOf(candidate.neighbours);
    if (letters === 's' || lineCount(candidate) < peaks.length || lineCount(candidate) > 2 * peaks.length + 2) continue;
    if (seen.has(letters) || seen.size >= triedMax) continue;
    seen.add(letters);
    const fit = fitRegion(window, patternModel(candidate, widthHz));
    if (fit.areas[0]! > 0 && fit.chiSquare < (best?.fit.chiSquare ?? Number.POSITIVE_INFINITY)) best = { fit, candidate };
  }
  if (best === undefined) return undefined;
  const allowed = nearlyAsGood * Math.max(freeChiSquare, window.data.length) + 10;
  return best.fit.chiSquare <= allowed ? best : undefined;
}

function lineCount({ neighbours }: CandidatePattern): number {
  return neighbours.reduce((count, n) => count * (n + 1), 1);
}

function freeLines(peaks: readonly Peak[], widthHz: number): RegionModel {
  const { parameters, width, phase, lorentzShare } = sharedParameters(widthHz);
  const terms = peaks.map(({ shiftHz }, k): Term => {
    parameters.push(around(shiftHz, widthHz));
    return { key: `(line ${k})`, lines: oneLine, shift: parameters.length - 1, widths: [width], phase, couplings: [] };
  });
  return { terms, parameters, lorentzShare, components: [{ offsetHz: 0, extraWidthHz: 0, share: 1 }] };
}

const oneLine = [{ offsetHz: 0, share: 1, perCoupling: [] }];

function patternModel(candidate: CandidatePattern, widthHz: number): RegionModel {
  const { parameters, width, phase, lorentzShare } = sharedParameters(widthHz);
  parameters.push(around(candidate.centreHz, 2 * widthHz));
  const shift = parameters.length - 1;
  const couplings = candidate.couplingsHz.map(() => {
    parameters.push({ kind: 'coupling', start: 0, mean: 0, sigma: 2, low: -3, high: 3 });
    return parameters.length - 1;
  });
  const term: Term = { key: '(pattern)', lines: patternLevels(candidate), shift, widths: [width], phase, couplings };
  return { terms: [term], parameters, lorentzShare, components: [{ offsetHz: 0, extraWidthHz: 0, share: 1 }] };
}

function around(shiftHz: number, widthHz: number): Parameter {
  return {
    kind: 'shift',
    start: shiftHz,
    mean: shiftHz,
    sigma: 2 * widthHz,
    low: shiftHz - 2 * widthHz,
    high: shiftHz + 2 * widthHz,
  };
}

function sharedParameters(widthHz: number) {
  const logWidth = Math.log(widthHz);
  const parameters: Parameter[] = [
    { kind: 'lorentz-share', start: 1, mean: 1, sigma: 0, low: 0, high: 1 },
    { kind: 'phase', start: 0, mean: 0, sigma: 0, low: -1, high: 1 },
    { kind: 'log-width', start: logWidth, mean: logWidth, sigma: 0.3, low: logWidth - 1, high: logWidth + 3 },
  ];
  return { parameters, lorentzShare: 0, phase: 1, width: 2 };
}
