import type { Spectrum } from '../spectrum/spectrum.js';
import { areaOf } from './areaOf.js';
import type { FittedRegion } from './fitRegions.js';
import type { MeasuredSignal } from './measured.js';
import { plainIntegral } from './plainIntegral.js';
import type { Target } from './signalTargets.js';
import { linesOfFit } from './tailsOf.js';
import { verdictOf } from './verdictOf.js';

/** Numbers that the area needs to stand above to count as present: as the detection limit of ICH Q2. */
const presentFactor = 3.3;

/**
 * Turns the fit of a region into the measured signal: area with uncertainty, place, width, and the verdict on its pattern.
 *
 * @source  see `areaOf`, `verdictOf`
 */
export function describeSignal(spectrum: Spectrum, fitted: FittedRegion, target: Target): MeasuredSignal {
  const { fit } = fitted;
  const { signal, species, key } = target;
  const { observeMhz } = spectrum;
  const t = fit.model.terms.findIndex((term) => term.key === key);
  const term = fit.model.terms[t]!;
  const { area, u, u0 } = areaOf(fitted, t);
  const lines = linesOfFit(fit).filter((line) => line.key === key);
  const isPresent = area > presentFactor * u0 && area > 2 * u;
  const shiftFree = fit.free.indexOf(term.shift);
  const shiftIndex = fit.model.terms.length + 2 + shiftFree;
  const shiftU = shiftFree < 0 ? undefined : Math.sqrt(fit.covariance[shiftIndex * fit.size + shiftIndex]!) / observeMhz;
  const verdict = verdictOf(spectrum, fitted, target, { area, isPresent });
  const isAlone = fitted.region.targets.length === 1;
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
    area,
    u,
    ...(isAlone ? { integral: plainIntegral(spectrum, low, high).area } : {}),
    declared: signal.pattern.text,
    ...(isPresent && couplings.length > 0 ? { couplingsHz: couplings } : {}),
    ...(isPresent ? {} : { areaUpper95: Math.max(0, area) + 1.645 * Math.max(u, u0) }),
    u0,
    fittedWith: correlations(fitted, t),
    ...verdict,
  };
}

function correlations(fitted: FittedRegion, t: number): MeasuredSignal['fittedWith'] {
  const { covariance, size, model } = fitted.fit;
  const keys = new Set(fitted.region.targets.map(({ key }) => key));
  return model.terms.flatMap(({ key }, other) => {
    if (other === t || !keys.has(key)) return [];
    const product = covariance[t * size + t]! * covariance[other * size + other]!;
    const correlation = product > 0 ? covariance[t * size + other]! / Math.sqrt(product) : 0;
    return [{ key, correlation: Math.round(correlation * 1e4) / 1e4 }];
  });
}
