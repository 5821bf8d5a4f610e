import { patternNoun } from '../pattern/patternWords.js';
import { splittingLetters } from '../pattern/splittingLetters.js';
import type { Spectrum } from '../spectrum/spectrum.js';
import { extraPrefix } from './addExtraLines.js';
import type { FittedRegion } from './fitRegions.js';
import type { MeasuredSignal, Verdict } from './measured.js';
import { misfitOf } from './misfitOf.js';
import type { Neighbourhood } from './neighbourhood.js';

import type { Rival } from './rivalPattern.js';
import type { Target } from './signalTargets.js';
import { sticksOf } from './tailsOf.js';

type Judged = Pick<MeasuredSignal, 'verdict' | 'words'> &
  Partial<Pick<MeasuredSignal, 'found' | 'leftOver' | 'other' | 'neighboursImplied' | 'couplingsHz'>>;

/** Lines of another signal this close cannot be told apart by eye. */
const crowdedWidths = 1.5;
/** Neighbours below this share of the signal do not crowd it. */
const crowdedShare = 0.02;
/** Relative rms misfit above which the lines are not the declared pattern's. */
const misfitMax = 0.2;
/** Below this a better pattern is a detail: a doublet of doublets with nearly equal couplings listed as a triplet. */
const detailMisfit = 0.05;
const oddsMin = 1000;
/** Lines this much wider than the spectrum's own are not one line each. */
export const strainMax = 1.6;
/** From here on the declared pattern is refused even when no other one could be named. */
const tornMax = 2.3;
/** Share left over above which the signal is no longer by itself. */
const crowdedLeftOver = 0.25;

/** What `verdictOf` judges. */
export interface Evidence {
  /** The region with the lines that had to be added. */
  readonly extra: FittedRegion;
  readonly target: Target;
  readonly area: number;
  readonly isPresent: boolean;
  /** The signal by itself with its declared pattern alone, and the best other pattern, when there was doubt. */
  readonly near?: Neighbourhood & { readonly strangeShare: number; readonly strain: number };
  readonly rival?: Rival;
  /** Whether other signals of the species are there: then this one should be. */
  readonly isExpected: boolean;
  /** Fitted width over the width of the spectrum's other lines. */
  readonly strain: number;
}

/**
 * The verdict on one signal's declared pattern, with its numbers and in words.
 *
 * @returns verdict, what was found, what is left over, the best other pattern
 * @source  own; odds by BIC as in `rivalPattern`
 */
export function verdictOf(spectrum: Spectrum, evidence: Evidence): Judged {
  const { extra, target, area, isPresent, rival } = evidence;
  const declared = patternNoun(target.signal.pattern);
  if (rival !== undefined && isProven(evidence, rival)) return differing(declared, rival);
  const leftOver = leftOverOf(spectrum, extra, target, area);
  const other = rival === undefined ? {} : { other: { pattern: rival.pattern, odds: rival.oddsAgainstExtras } };
  const rest = leftOver ? `; ${percent(leftOver.share)} left over at ${leftOver.shiftPpm.toFixed(3)} ppm` : '';
  const found = { ...other, ...(leftOver ? { leftOver } : {}) };
  if (!isPresent) {
    const instead = leftOver ? `; something else at ${leftOver.shiftPpm.toFixed(3)} ppm` : '';
    return { verdict: 'absent', ...found, words: `${declared} absent${instead}` };
  }
  if (misfitOf(extra, target) > misfitMax) {
    return { verdict: 'differs', ...found, words: `the lines are not those of a ${declared}${rest}` };
  }
  if (evidence.strain > tornMax) {
    const times = evidence.strain.toFixed(1);
    return {
      verdict: 'differs',
      ...found,
      words: `lines ${times} times as wide as the others, not those of a ${declared}${rest}`,
    };
  }
  const unknown = (leftOver?.share ?? 0) > crowdedLeftOver ? 'lines that nothing explains' : undefined;
  const crowd = crowdedBy(extra, target, area) ?? unknown;
  const verdict: Verdict = crowd !== undefined ? 'crowded' : 'matches';
  const words = crowd !== undefined ? `${declared}, crowded by ${crowd}${rest}` : `${declared} as expected${rest}`;
  const neighboursImplied = neighboursOf(target.signal.pattern);
  return { verdict, found: target.signal.pattern.text, neighboursImplied, ...found, words };
}

/**
 * Another pattern is proven when it beats the declared one with and without extra lines, and by more than a detail of the
 * shape. Where nothing of the declared pattern is there, whatever else is there differs only if the species is.
 */
function isProven({ near, target, isPresent, isExpected }: Evidence, rival: Rival): boolean {
  if (near === undefined || rival.oddsAgainstDeclared < oddsMin) return false;
  const misfit = misfitOf(near, target);
  const isStrained = near.strain > strainMax;
  if (!isStrained && misfit < detailMisfit && near.strangeShare < detailMisfit) return false;
  // What fits no better to the eye is no proof, whatever the odds of two wrong models say.
  const rivalMisfit = misfitOf({ fit: rival.fit, window: near.window }, target);
  if (rivalMisfit > misfitMax) return false;
  if (!isStrained && near.strangeShare < detailMisfit && rivalMisfit > Math.max(0.6 * misfit, 0.03)) return false;
  return isPresent ? rival.oddsAgainstExtras > oddsMin : isExpected;
}

function differing(declared: string, rival: Rival): Judged {
  const splittings = rival.neighbours.map((neighbours) => ({ letter: splittingLetters[neighbours]!, neighbours }));
  const found = patternNoun({ splittings, isBroad: false, isMultiplet: false });
  const couplingsHz = rival.couplingsHz.map((value) => Math.round(value * 100) / 100);
  const couplings = couplingsHz.length > 0 ? `, J = ${couplingsHz.map((value) => value.toFixed(1)).join(', ')} Hz` : '';
  return {
    verdict: 'differs',
    found: rival.pattern,
    couplingsHz,
    other: { pattern: rival.pattern, odds: rival.oddsAgainstExtras },
    neighboursImplied: rival.neighbours.reduce((sum, n) => sum + n, 0),
    words: `a ${found}${couplings}, where a ${declared} is expected`,
  };
}

function neighboursOf(pattern: Target['signal']['pattern']): number {
  return pattern.splittings.reduce((sum, { neighbours }) => sum + neighbours, 0);
}

function leftOverOf(spectrum: Spectrum, fitted: FittedRegion, target: Target, area: number): MeasuredSignal['leftOver'] {
  const { fit } = fitted;
  const lines = sticksOf(fit);
  const own = lines.filter((line) => line.key === target.key);
  const reach = 6 * own[0]!.widthHz;
  const high = Math.max(...own.map((line) => line.shiftHz)) + reach;
  const low = Math.min(...own.map((line) => line.shiftHz)) - reach;
  let sum = 0;
  let variance = 0;
  let top: { area: number; shiftHz: number } | undefined;
  fit.model.terms.forEach(({ key, shift }, t) => {
    if (!key.startsWith(extraPrefix)) return;
    const shiftHz = fit.values[shift]!;
    const extra = fit.areas[t]!;
    if (shiftHz > high || shiftHz < low) return;
    sum += extra;
    variance += fit.covarianceOf()[t * fit.size + t]!;
    if (extra > (top?.area ?? 0)) top = { area: extra, shiftHz };
  });
  if (top === undefined) return undefined;
  const total = Math.max(area, 0) + sum;
  return { share: sum / total, u: Math.sqrt(variance) / total, shiftPpm: top.shiftHz / spectrum.observeMhz };
}

function crowdedBy(fitted: FittedRegion, target: Target, area: number): string | undefined {
  const lines = sticksOf(fitted.fit);
  const own = lines.filter((line) => line.key === target.key && line.area > 0.02 * area);
  const near = lines.find(
    (line) =>
      line.key !== target.key &&
      !line.key.startsWith(extraPrefix) &&
      line.area > crowdedShare * area &&
      own.some((mine) => Math.abs(mine.shiftHz - line.shiftHz) < crowdedWidths * Math.max(mine.widthHz, line.widthHz)),
  );
  return near?.key;
}

function percent(share: number): string {
  const value = share * 100;
  return `${value < 9.95 ? Number(value.toPrecision(1 + (value >= 1 ? 0 : 0))) : Math.round(value)} %`;
}
