import { areaOf, summedArea } from './areaOf.js';
import type { BinnedSpectrum } from './binSpectrum.js';
import type { FittedRegion } from './fitRegions.js';
import type { MeasuredSignal } from './measured.js';
import { misfitOf } from './misfitOf.js';
import { couplingReachHz, neighbourhood } from './neighbourhood.js';
import type { Peak } from './pickPeaks.js';
import { plainIntegral } from './plainIntegral.js';
import { rivalPattern } from './rivalPattern.js';
import type { Target } from './signalTargets.js';
import { strangeLines } from './strangeLines.js';
import { sticksOf } from './tailsOf.js';
import { type Evidence, strainMax, verdictOf } from './verdictOf.js';
import type { Whitening } from './whiteningFilter.js';

const presentFactor = 3.3;
/** Relative misfit from which another pattern is worth trying. */
const doubtfulMisfit = 0.04;
/** Lines below this share of the signal's tallest one make no other pattern. */
const strangerShare = 0.04;

/** What the description of a signal draws on. */
export interface SignalContext {
  readonly spectrum: BinnedSpectrum;
  readonly whitening: Whitening;
  /** Relative misfit of the shared line shape. */
  readonly misfit: number;
  /** Every region with declared patterns alone, and with extra lines, in the same order. */
  readonly plain: readonly FittedRegion[];
  readonly extra: readonly FittedRegion[];
  /** Index of the signal's region. */
  readonly home: number;
  /** Species of which some signal was found with its pattern. */
  readonly seenSpecies: ReadonlySet<string>;
  /** Width of the lines of this spectrum: the middle of all sharp signals. */
  readonly usualHz: number;
  /** Lines that nothing declared explains. */
  readonly unexplained: readonly Peak[];
}

/**
 * Turns the fit of a region into the measured signal: area with uncertainty, place, width, and the verdict on its pattern.
 *
 * @source  see `areaOf`, `verdictOf`
 */
export function describeSignal(context: SignalContext, target: Target): MeasuredSignal {
  const { spectrum } = context;
  const extra = context.extra[context.home]!;
  const { fit } = extra;
  const { signal, species, key } = target;
  const { observeMhz } = spectrum;
  const t = fit.model.terms.findIndex((term) => term.key === key);
  const term = fit.model.terms[t]!;
  const { area, u, u0 } = areaOf(extra, t);
  const lines = sticksOf(fit).filter((line) => line.key === key);
  const isPresent = isSignificant(area, u, u0);
  const shiftFree = fit.free.indexOf(term.shift);
  const shiftIndex = fit.model.terms.length + 2 + shiftFree;
  const shiftU = shiftFree < 0 ? undefined : Math.sqrt(fit.covarianceOf()[shiftIndex * fit.size + shiftIndex]!) / observeMhz;
  const doubt = signal.pattern.isBroad ? {} : doubtsOf(context, target, isPresent);
  const isExpected = context.seenSpecies.has(species.id) || species.signals.length === 1;
  const judged = verdictOf(spectrum, {
    extra,
    target,
    area,
    isPresent,
    isExpected,
    strain: signal.pattern.isBroad ? 1 : strainOf(context, extra, target),
    ...doubt,
  });
  // Where another pattern stands, its area is what is there; the declared one only covers a part of it.
  const other = judged.verdict === 'differs' ? doubt.rival : undefined;
  const isAlone = extra.region.targets.length === 1;
  const declared =
    context.misfit > 0 && isAlone && isPresent && fit.areas.length === 1
      ? summedArea(extra, { area, u }, lines, { baselineU: spectrum.baselineU, misfit: context.misfit })
      : { area, u };
  const measured = other && judged.found === other.pattern ? areaOf({ ...doubt.near!, fit: other.fit }, 0) : declared;
  const widest = lines[0]!.widthHz;
  const high = (Math.max(...lines.map((line) => line.shiftHz)) + 12 * widest) / observeMhz;
  const low = (Math.min(...lines.map((line) => line.shiftHz)) - 12 * widest) / observeMhz;
  const couplings = term.couplings.map((index, k) => Math.round((target.couplingsHz[k]! + fit.values[index]!) * 100) / 100);
  return {
    key,
    species: species.id,
    use: signal.use,
    nuclei: signal.nuclei,
    shiftPpm: fit.values[term.shift]! / observeMhz,
    ...(shiftU !== undefined ? { shiftU } : {}),
    widthHz: widest,
    area: measured.area,
    u: measured.u,
    ...(isAlone ? { integral: plainIntegral(spectrum, low, high).area } : {}),
    declared: signal.pattern.text,
    ...(isPresent && couplings.length > 0 ? { couplingsHz: couplings } : {}),
    ...(judged.verdict === 'absent' ? { areaUpper95: Math.max(0, area) + 1.645 * Math.max(u, u0) } : {}),
    u0,
    fittedWith: correlations(extra, t),
    ...judged,
  };
}

/** Whether an area stands clear of zero: as the detection limit of ICH Q2, and of its own uncertainty. */
export function isSignificant(area: number, u: number, u0: number): boolean {
  return area > presentFactor * u0 && area > 2 * u;
}

/** Looks for another pattern where the declared one leaves lines unexplained. */
function doubtsOf(context: SignalContext, target: Target, isPresent: boolean): Pick<Evidence, 'near' | 'rival'> {
  const home = context.plain[context.home]!;
  const isStrong = isPresent || context.extra[context.home]!.fit.areas.length > home.fit.areas.length;
  if (!isStrong) return {};
  if (!hasStrangers(context, target) && misfitOf(home, target) < doubtfulMisfit && strainOf(context, home, target) < strainMax)
    return {};
  const near = neighbourhood(context.spectrum, context.plain, home, target, context);
  const { all, strange } = strangeLines(near);
  if (strange.length === 0 && misfitOf(near, target) < doubtfulMisfit && strainOf(context, home, target) < strainMax) return {};
  const rival = rivalPattern(near, all);
  const strangeArea = strange.reduce((sum, { area }) => sum + area, 0);
  const strangeShare = strangeArea / (strangeArea + Math.max(0, near.fit.areas[0]!));
  return { near: { ...near, strangeShare, strain: strainOf(context, home, target) }, ...(rival ? { rival } : {}) };
}

/** Fitted width over the width that the spectrum's lines have. */
function strainOf({ usualHz }: SignalContext, { fit }: FittedRegion, target: Target): number {
  return sticksOf(fit).find(({ key }) => key === target.key)!.widthHz / usualHz;
}

/** Whether lines that nothing explains stand where they could belong to the signal. */
function hasStrangers({ unexplained, extra, home }: SignalContext, target: Target): boolean {
  const own = sticksOf(extra[home]!.fit).filter(({ key }) => key === target.key);
  const high = Math.max(...own.map(({ shiftHz }) => shiftHz)) + couplingReachHz;
  const low = Math.min(...own.map(({ shiftHz }) => shiftHz)) - couplingReachHz;
  const least = strangerShare * Math.max(...own.map(({ area }) => area));
  return unexplained.some(({ shiftHz, area }) => shiftHz > low && shiftHz < high && area > least);
}

function correlations(fitted: FittedRegion, t: number): MeasuredSignal['fittedWith'] {
  const { size, model } = fitted.fit;
  const covariance = fitted.fit.covarianceOf();
  const keys = new Set(fitted.region.targets.map(({ key }) => key));
  return model.terms.flatMap(({ key }, other) => {
    if (other === t || !keys.has(key)) return [];
    const product = covariance[t * size + t]! * covariance[other * size + other]!;
    const correlation = product > 0 ? covariance[t * size + other]! / Math.sqrt(product) : 0;
    return [{ key, correlation: Math.round(correlation * 1e4) / 1e4 }];
  });
}
