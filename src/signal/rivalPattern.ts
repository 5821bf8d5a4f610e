import { splittingLetters } from '../pattern/splittingLetters.js';
import { addExtraLines } from './addExtraLines.js';
import { addLineValue } from './addLineValue.js';
import { type CandidatePattern, candidatePatterns, lettersOf } from './candidatePatterns.js';
import { fitRegion } from './fitRegion.js';
import { withComponents } from './lineComponents.js';
import type { Neighbourhood } from './neighbourhood.js';
import type { Peak } from './pickPeaks.js';
import type { Parameter, RegionFit, RegionModel, Term } from './regionModel.js';
import { levelsOf } from './signalTargets.js';

/** The pattern other than the declared one that explains a signal best. */
export interface Rival {
  readonly pattern: string;
  readonly neighbours: readonly number[];
  readonly couplingsHz: readonly number[];
  readonly shiftHz: number;
  readonly fit: RegionFit;
  /** Odds by BIC against the declared pattern alone, and against the declared one with its extra lines. */
  readonly oddsAgainstDeclared: number;
  readonly oddsAgainstExtras: number;
}

const triedMax = 8;
const startsPerPattern = 2;
const oddsMax = 1e12;
/** Splittings that spread lines by less than this many widths are not seen as splittings. */
const hiddenWidths = 1.3;
/** Couplings closer than this many widths are told apart by nothing that a chemist would name. */
const sameWidths = 0.6;

/**
 * Finds the best other pattern for a signal: proposes patterns from the lines that stand there, fits the most promising ones in
 * place of the declared pattern, and weighs them by BIC.
 *
 * @param peaks lines found around the signal, by descending shift
 * @returns undefined when no other pattern fits at all
 * @source  G. Schwarz, Ann. Stat. 1978, 6, 461; odds = exp(dBIC / 2) (shared formulas, section 8)
 */
export function rivalPattern(near: Neighbourhood, peaks: readonly Peak[]): Rival | undefined {
  if (peaks.length === 0) return undefined;
  const { target, widthHz } = near;
  const declared = lettersOf(target.signal.pattern.splittings.map(({ neighbours }) => neighbours));
  const ranked = candidatePatterns(peaks, target.couplingsHz, widthHz)
    .filter(({ neighbours }) => lettersOf(neighbours) !== declared)
    .map((candidate) => ({ candidate, misfit: linearMisfit(near, candidate) }))
    .sort((a, b) => a.misfit - b.misfit);
  const starts = new Map<string, number>();
  let best: { candidate: CandidatePattern; fit: RegionFit; bic: number } | undefined;
  for (const { candidate } of ranked) {
    const letters = lettersOf(candidate.neighbours);
    const count = starts.get(letters) ?? 0;
    if (count >= startsPerPattern) continue;
    if (count === 0 && starts.size >= triedMax) break;
    starts.set(letters, count + 1);
    const fit = fitRegion(near.window, withRival(near, candidate));
    const bic = criterion(fit);
    if (isHidden(candidate, fit, widthHz)) continue;
    if (fit.areas[0]! > 0 && (best === undefined || bic < best.bic)) best = { candidate, fit, bic };
  }
  if (best === undefined) return undefined;
  const extra = addExtraLines(near, near.misfit).fit;
  const scale = Math.max(1, Math.min(best.fit.chiSquare, extra.chiSquare) / near.window.data.length);
  const rival = best.fit;
  const odds = (other: RegionFit) => Math.min(oddsMax, Math.exp((criterion(other, scale) - criterion(rival, scale)) / 2));
  const term = rival.model.terms[0]!;
  const fittedHz = best.candidate.couplingsHz.map((j, k) => Math.abs(j + rival.values[term.couplings[k]!]!));
  const { neighbours, couplingsHz } = merged(best.candidate.neighbours, fittedHz, widthHz);
  return {
    pattern: lettersOf(neighbours),
    neighbours,
    couplingsHz,
    shiftHz: rival.values[term.shift]!,
    fit: rival,
    oddsAgainstDeclared: odds(near.fit),
    oddsAgainstExtras: odds(extra),
  };
}

/** Couplings that the line width cannot tell apart are one: a triplet of doublets with equal couplings is a quartet. */
function merged(neighbours: readonly number[], couplingsHz: readonly number[], widthHz: number) {
  const parts = neighbours.map((n, k) => ({ n, j: couplingsHz[k]! })).sort((a, b) => b.j - a.j);
  const kept: { n: number; j: number }[] = [];
  for (const part of parts) {
    const last = kept.at(-1);
    if (last !== undefined && last.j - part.j < sameWidths * widthHz && last.n + part.n < splittingLetters.length) {
      last.j = (last.j * last.n + part.j * part.n) / (last.n + part.n);
      last.n += part.n;
    } else kept.push({ ...part });
  }
  return { neighbours: kept.map(({ n }) => n), couplingsHz: kept.map(({ j }) => j) };
}

/** A splitting narrower than the lines only widens them: a long-range coupling or the shape of the line, no pattern. */
function isHidden({ neighbours, couplingsHz }: CandidatePattern, fit: RegionFit, widthHz: number): boolean {
  const indices = fit.model.terms[0]!.couplings;
  return neighbours.some((n, k) => n * Math.abs(couplingsHz[k]! + fit.values[indices[k]!]!) < hiddenWidths * widthHz);
}

/** BIC with known noise, widened where even the best model does not reach it. */
function criterion(fit: RegionFit, scale = 1): number {
  return fit.cost / scale + (fit.areas.length + fit.free.length) * Math.log(fit.pointCount);
}

/** Sum of squares that a candidate leaves when only its area is fitted. */
function linearMisfit({ trace, window, widthHz }: Neighbourhood, candidate: CandidatePattern): number {
  const shape = new Float64Array(trace.length);
  for (const { offsetHz, share } of patternLevels(candidate)) {
    // A little wider than the lines are: the couplings are read off to a fraction of the width only.
    const line = { shiftHz: candidate.centreHz + offsetHz, area: share, widthHz: 1.3 * widthHz, phase: 0, lorentzShare: 1 };
    addLineValue(shape, line, { firstHz: window.firstHz, stepHz: window.stepHz });
  }
  let match = 0;
  let energy = 0;
  let total = 0;
  for (let i = 0; i < trace.length; i += 1) {
    match += shape[i]! * trace[i]!;
    energy += shape[i]! ** 2;
    total += trace[i]! ** 2;
  }
  return total - (match > 0 ? match ** 2 / energy : 0);
}

/** The lines of a proposed pattern, coincident ones apart. */
export function patternLevels({ neighbours, couplingsHz }: CandidatePattern) {
  const splittings = neighbours.map((n) => ({ letter: splittingLetters[n]!, neighbours: n }));
  return levelsOf({ splittings }, couplingsHz);
}

/** The model of the neighbourhood with the declared pattern replaced. */
function withRival({ fit, widthHz }: Neighbourhood, candidate: CandidatePattern): RegionModel {
  const { model } = fit;
  const parameters = model.parameters.map(
    // A width that strained to imitate another pattern starts afresh.
    (parameter, k): Parameter => ({ ...parameter, start: parameter.kind === 'log-width' ? parameter.mean : fit.values[k]! }),
  );
  const old = model.terms[0]!;
  const reach = Math.max(4 * widthHz, 6);
  const centre = candidate.centreHz;
  parameters[old.shift] = { kind: 'shift', start: centre, mean: centre, sigma: reach, low: centre - reach, high: centre + reach };
  for (const index of old.couplings) parameters[index] = { ...parameters[index]!, sigma: 0 };
  const couplings = candidate.couplingsHz.map(() => {
    parameters.push({ kind: 'coupling', start: 0, mean: 0, sigma: 2, low: -3, high: 3 });
    return parameters.length - 1;
  });
  const term: Term = { ...old, lines: withComponents(patternLevels(candidate), model.components), couplings };
  return { ...model, parameters, terms: [term] };
}
