import type { BinnedSpectrum } from './binSpectrum.js';
import type { SharedShape } from './buildRegionModel.js';
import { type FittedRegion, fitRegions } from './fitRegions.js';
import type { Region } from './groupRegions.js';
import { learnComponents } from './learnComponents.js';
import { singleComponent } from './lineComponents.js';
import type { Located } from './locateSignals.js';
import { detectableMisfit, misfitOf } from './misfitOf.js';
import type { Whitening } from './whiteningFilter.js';

const loose = {
  logWidthSigma: 1,
  phase: 0,
  phaseSigma: 0.1,
  lorentzShare: 1,
  lorentzShareU: 0,
  components: singleComponent,
  misfit: 0,
};
const teachersMax = 4;
/** A pattern that misfits by more is not what was declared, and teaches nothing about the shape of a line. */
const strainedMisfit = 0.25;
/** Below this a Lorentzian with its misfit allowed for is safer than a shape of many parts. */
const plainMisfit = 0.03;
/** With one signal alone nothing tells shape from impurity: this much is usual for a well-adjusted magnet (common practice). */
const aloneMisfitMax = 0.002;

/**
 * Learns the line shape of a spectrum from its strongest signals: a Lorentzian where that fits, else the sum of a few that fits
 * one strong signal and proves itself on the others.
 *
 * @param guessHz width to start from
 * @returns width (middle of the teachers), its spread, components and the misfit that stays
 * @source  own; inhomogeneous line as a sum of shifted Lorentzians (common practice of reference deconvolution, Morris 1988)
 */
export function learnShape(
  spectrum: BinnedSpectrum,
  regions: readonly Region[],
  located: ReadonlyMap<string, Located>,
  guessHz: number,
  whitening: Whitening,
): SharedShape {
  const start: SharedShape = { ...loose, widthHz: guessHz };
  const gain = (region: Region) => Math.max(...region.targets.map(({ key }) => located.get(key)!.gain));
  const teachers = regions
    .filter((region) => gain(region) > 100 && region.targets.every(({ signal }) => !signal.pattern.isBroad))
    .sort((a, b) => a.targets.length - b.targets.length || gain(b) - gain(a))
    .slice(0, teachersMax);
  if (teachers.length === 0) return { ...start, logWidthSigma: 0.4 };
  const fits = fitRegions(spectrum, teachers, located, start, whitening).filter((fitted) => worstMisfit(fitted) < strainedMisfit);
  if (fits.length === 0) return { ...start, logWidthSigma: 0.3, phaseSigma: 0.05 };
  const plain = { ...start, widthHz: middleWidth(fits), logWidthSigma: 0.2, phaseSigma: 0.05 };
  const misfit = sharedMisfit(fits);
  // Where a spectrum is out of phase its lines say by how much; the fit may then lean further.
  const phase = middle(fits.map(({ fit }) => fit.values[fit.model.terms[0]!.phase]!));
  const leaning = misfit > 0 ? { ...plain, misfit, phase, phaseSigma: 0.1 } : plain;
  if (misfit < plainMisfit) return leaning;
  return learnComponents(spectrum, fits, located, leaning, whitening) ?? leaning;
}

/**
 * The misfit that strong signals share, and that is therefore the line shape's. One signal that a Lorentzian fits to the noise
 * proves the shape as far as it could have shown a fault; a misfit that one signal alone shows is mostly its own affair.
 */
function sharedMisfit(fits: readonly FittedRegion[]): number {
  const misfits = fits.map(worstMisfit);
  const shown = misfits.filter((misfit) => misfit > 0);
  const proven = fits.flatMap((fitted, k) =>
    misfits[k] === 0 ? [Math.max(...fitted.region.targets.map((target) => detectableMisfit(fitted, target)))] : [],
  );
  const least = Math.min(...shown, Number.POSITIVE_INFINITY);
  if (shown.length === 0 || Math.min(...proven, Number.POSITIVE_INFINITY) < least) return 0;
  return shown.length > 1 ? least : Math.min(least, aloneMisfitMax);
}

/** The largest relative misfit among the signals of a region. */
export function worstMisfit(fitted: FittedRegion): number {
  return Math.max(...fitted.region.targets.map((target) => misfitOf(fitted, target)));
}

function middleWidth(fits: readonly FittedRegion[]): number {
  return Math.exp(middle(fits.map(({ fit }) => fit.values[fit.model.terms[0]!.widths[0]!]!)));
}

function middle(values: readonly number[]): number {
  const sorted = [...values].sort((a, b) => a - b);
  return sorted[Math.floor((sorted.length - 1) / 2)]!;
}
