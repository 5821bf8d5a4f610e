import type { Method } from '../method/method.js';
import type { Spectrum } from '../spectrum/spectrum.js';
import { addExtraLines } from './addExtraLines.js';
import { areaOf } from './areaOf.js';
import { backgroundPrefix, backgroundTargets } from './backgroundTargets.js';
import { binSpectrum } from './binSpectrum.js';
import { compareWithOthers } from './compareWithOthers.js';
import { describeSignal, isSignificant } from './describeSignal.js';
import { drawStrip } from './drawStrip.js';
import { findUnassigned } from './findUnassigned.js';
import { type FittedRegion, fitRegions } from './fitRegions.js';
import { flagSignals } from './flagSignals.js';
import { groupRegions, narrowMargin } from './groupRegions.js';
import { guessWidth } from './guessWidth.js';
import { learnShape } from './learnShape.js';
import { locateSignals } from './locateSignals.js';
import type { MeasuredSignal, Measurement } from './measured.js';
import { measureRange } from './measureRange.js';
import { measureSolvents } from './measureSolvents.js';
import { misfitOf } from './misfitOf.js';
import { signalTargets, type Target } from './signalTargets.js';
import { sticksOf } from './tailsOf.js';
import { unexplainedPeaks } from './unexplainedPeaks.js';
import { whiteningFilter } from './whiteningFilter.js';

/** Relative misfit of the line shape from which far tails are left out. */
const narrowMisfit = 0.01;

/**
 * The table of contents of measuring: locate each declared pattern, learn the line shape, fit region by region, look at what
 * is left over, and say what was found.
 *
 * @param fine     phased, flat, referenced
 * @param method   signals with their patterns
 * @returns signals in method order; areas in units of the spectrum x Hz
 * @source  see the steps
 */
export function measureSignals(fine: Spectrum, method: Method): Measurement {
  const declared = signalTargets(method, fine.observeMhz);
  const targets = [...declared, ...backgroundTargets(method, fine.observeMhz)];
  const guessHz = guessWidth(fine, targets);
  const spectrum = binSpectrum(fine, guessHz);
  const whitening = whiteningFilter(spectrum.noiseCorrelation);
  const located = locateSignals(spectrum, targets, guessHz);
  const widthOf = (target: Target) => (target.signal.pattern.isBroad ? 8 : 1) * guessHz;
  const regions = groupRegions(spectrum, targets, located, widthOf);

  const shape = learnShape(spectrum, regions, located, guessHz, whitening);
  const narrowed = shape.misfit > narrowMisfit ? groupRegions(spectrum, targets, located, widthOf, narrowMargin) : regions;
  const fitted = fitRegions(spectrum, narrowed, located, shape, whitening);
  const explained = fitted.map((region) => (isBackground(region) ? region : addExtraLines(region, shape.misfit)));

  const byKey = new Map<string, MeasuredSignal>();
  const residual = unexplainedPeaks(spectrum, explained, method, shape);
  const seenSpecies = speciesSeen(explained);
  const usualHz = usualWidth(explained, shape.widthHz);
  explained.forEach((extra, home) => {
    for (const target of extra.region.targets) {
      if (target.key.startsWith(backgroundPrefix)) continue;
      const strip = drawStrip(spectrum, extra, target);
      const described = describeSignal(
        {
          spectrum,
          whitening,
          misfit: shape.misfit,
          plain: fitted,
          extra: explained,
          home,
          seenSpecies,
          unexplained: residual.peaks,
          usualHz,
        },
        target,
      );
      byKey.set(target.key, { ...described, ...(strip ? { strip } : {}) });
    }
  });
  const ranged = declared.filter(({ lines }) => lines.length === 0);
  for (const target of ranged) byKey.set(target.key, measureRange(spectrum, target, explained));
  const signals = compareWithOthers(declared.map(({ key }) => byKey.get(key)!));

  return {
    signals,
    unassigned: findUnassigned(spectrum, method, residual, { widthHz: shape.widthHz, whitening }),
    solvents: measureSolvents(spectrum, method, fitted, shape.widthHz),
    signalToNoise: tallestLine(signals, explained, spectrum.noise),
    lineShape: { widthHz: shape.widthHz, lorentzShare: shape.lorentzShare, asymmetry: spectrum.quality.referenceAsymmetry ?? 0 },
    flags: flagSignals(signals),
  };
}

/** Whether a region holds nothing that the method declares. */
function isBackground({ region }: FittedRegion): boolean {
  return region.targets.every(({ key }) => key.startsWith(backgroundPrefix));
}

/** Width of the lines: the middle of all sharp signals that stand clear of the noise; of fewer than three, the learned one. */
function usualWidth(regions: readonly FittedRegion[], otherwiseHz: number): number {
  const widths = regions.flatMap((region) =>
    region.region.targets.flatMap((target, t) => {
      const { area, u, u0 } = areaOf(region, t);
      if (target.signal.pattern.isBroad || !isSignificant(area, u, u0)) return [];
      return [sticksOf(region.fit).find(({ key }) => key === target.key)!.widthHz];
    }),
  );
  widths.sort((a, b) => a - b);
  return widths.length < 3 ? otherwiseHz : widths[Math.floor((widths.length - 1) / 2)]!;
}

/** Species of which at least one signal is there with its own pattern. */
function speciesSeen(regions: readonly FittedRegion[]): Set<string> {
  const seen = new Set<string>();
  for (const region of regions) {
    region.region.targets.forEach((target, t) => {
      const { area, u, u0 } = areaOf(region, t);
      if (isSignificant(area, u, u0) && misfitOf(region, target) < 0.1) seen.add(target.species.id);
    });
  }
  return seen;
}

/** Height of the tallest data point under a diagnostic signal over the rms noise. */
function tallestLine(signals: readonly MeasuredSignal[], regions: ReturnType<typeof fitRegions>, noise: number): number {
  let tallest = 0;
  const diagnostic = new Set(
    signals.filter(({ use, verdict }) => use !== 'ignore' && verdict !== 'absent').map(({ key }) => key),
  );
  for (const { region, window, fit } of regions) {
    if (!region.targets.some(({ key }) => diagnostic.has(key))) continue;
    for (const value of window.data) tallest = Math.max(tallest, value - fit.level);
  }
  return noise > 0 ? tallest / noise : 0;
}
