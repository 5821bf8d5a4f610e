import type { Raw } from './complexFrom.js';
import type { ComplexSpectrum } from './complexSpectrum.js';
import { findPeaks, type Peak } from './findPeaks.js';
import type { GroupFit, SlopeOf } from './fitGroup.js';
import { fitPhase, type PhaseFit } from './fitPhase.js';
import { lessNegative } from './lessNegative.js';
import { localPhases } from './localPhases.js';
import { scanFirstOrder } from './scanFirstOrder.js';
import { subtractLines } from './subtractLines.js';

/** The lines of a spectrum and the phase that they agree on. */
export interface FoundLines {
  /** Places and widths in points of `raw.analysis`, strongest first. */
  readonly peaks: readonly Peak[];
  /** rms of one quadrature of the analysis. */
  readonly noise: number;
  readonly local: readonly GroupFit[];
  readonly fit: PhaseFit;
  readonly slope: SlopeOf;
}

const peakCountMax = 200;
const level = 8;
/** Lines that each group may add where its fit leaves most. */
const additions = 2;
/** Lines above this many times the noise are taken out to see what stands on their tails. */
const giantFrom = 100;
const giantsMax = 6;
/** A range of slopes wider than this needs a first guess. */
const wideTurns = 20;
/** A slope that bends the phase by more than this across a group calls for another look at the groups. */
const bendRad = 0.01;

/**
 * Finds the lines and their phase together: tops of the magnitude, a first guess of the slope, local phases and the straight line
 * through them; then the giants are taken out, tails and all, to find what stands on them, and the rest is done again.
 *
 * @param raw           spectrum and its analysis
 * @param slopeRangeRad least and greatest first order to consider
 * @returns no peaks when nothing stands out of the noise by a factor of 8
 * @source `findPeaks`, `scanFirstOrder`, `fitGroup`, `fitPhase`
 */
export function findLines(raw: Raw, slopeRangeRad: readonly [number, number]): FoundLines {
  const { analysis } = raw;
  const pointCount = analysis.real.length;
  const perIndependent = Math.max(1, pointCount / raw.analysisIndependent);
  const slopeOf = (slopeRad: number): SlopeOf => ({ step: slopeRad / pointCount, turnsThrough: raw.turnsThrough });
  const { peaks: tops, noise } = findPeaks(analysis, peakCountMax, level, perIndependent);
  // An onset seen in time leaves a few turns at most: the groups themselves tell better than single tops, which tails of giants turn.
  const isWide = slopeRangeRad[1] - slopeRangeRad[0] > 2 * Math.PI * wideTurns;
  let slopeRad = isWide ? scanFirstOrder(analysis, tops, noise, slopeRangeRad).slopeRad : 0;
  let local = localPhases(analysis, tops, noise, slopeOf(slopeRad), 0);
  let fit = fitPhase(local, pointCount, slopeRad, slopeRangeRad);
  const peaks = addHidden(analysis, tops, local, noise, slopeOf(isWide ? fit.firstRad : slopeRad), perIndependent);
  for (let turn = 0; turn < 3; turn += 1) {
    const extent = Math.max(0, ...local.map(({ group }) => group.to - group.from));
    const isSettled = Math.abs(fit.firstRad - slopeRad) * (extent / pointCount) < bendRad;
    if (isSettled && (turn > 0 || peaks === tops)) break;
    // The first look, with giants in the way, only serves to take them out.
    if (turn > 0 || isWide) slopeRad = fit.firstRad;
    local = localPhases(analysis, peaks, noise, slopeOf(slopeRad), additions);
    fit = fitPhase(
      local,
      pointCount,
      slopeRad,
      turn === 0 ? slopeRangeRad : [slopeRad - 0.6 * Math.PI, slopeRad + 0.6 * Math.PI],
    );
  }
  if (raw.turnsThrough && local.length > 0) fit = lessNegative(analysis, peaks, noise, fit);
  return { peaks, noise, local, fit, slope: slopeOf(fit.firstRad) };
}

/** Magnitude of a line's tail at a place. */
function tailAt({ magnitude, widthPoints, index }: Peak, at: number): number {
  const half = widthPoints / 2;
  return (magnitude * half) / Math.hypot(half, at - index);
}

/** What stands on the tails of giants. */
function addHidden(
  analysis: ComplexSpectrum,
  tops: readonly Peak[],
  local: readonly GroupFit[],
  noise: number,
  slope: SlopeOf,
  perIndependent: number,
): readonly Peak[] {
  const strength = ({ group }: GroupFit) => Math.max(...group.members.map(({ magnitude }) => magnitude));
  const isFree = (peak: Peak) => tops.every((other) => other === peak || tailAt(other, peak.index) < 0.1 * peak.magnitude);
  const giants = local.filter((one) => strength(one) > giantFrom * noise && one.group.members.some(isFree)).slice(0, giantsMax);
  if (giants.length === 0) return tops;
  const taken = giants.flatMap(({ group }) => group.members);
  const rest = findPeaks(subtractLines(analysis, giants, slope), peakCountMax, level, perIndependent).peaks;
  const isOwn = ({ index, magnitude }: Peak) =>
    taken.some((giant) => {
      const away = Math.abs(index - giant.index) / giant.widthPoints;
      return away < 1.2 || (away < 6 && magnitude < 0.03 * giant.magnitude);
    });
  const hidden = rest.filter((peak) => !isOwn(peak));
  return [...taken, ...hidden].sort((a, b) => b.magnitude - a.magnitude || a.index - b.index).slice(0, peakCountMax);
}
