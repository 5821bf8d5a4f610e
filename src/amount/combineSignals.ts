import type { MethodSpecies } from '../method/method.js';
import type { MeasuredSignal } from '../signal/measured.js';

/** What the signals of one species say together. */
export interface CombinedSignals {
  /** Area per nucleus, arbitrary units x Hz. */
  readonly areaPerNucleus: number;
  /** Standard uncertainty, widened by the disagreement of the signals. */
  readonly u: number;
  /** Standard uncertainty at zero amount, for the detection limit. */
  readonly u0: number;
  /** Chi-square over degrees of freedom of the signals about their mean; absent for one signal. */
  readonly agreement?: number;
}

/**
 * Combines the quantified signals of one species into one area per nucleus by weights 1/u2.
 *
 * @param species  the species of the method
 * @param measured all signals of the time point
 * @returns undefined when no signal of the species could be quantified; u is multiplied by the Birge ratio when the signals
 *          disagree by more than their uncertainties (their disagreement is evidence, not noise to be averaged away)
 * @source  weighted mean: JCGM 100:2008, F.1.2.4; Birge, Phys. Rev. 1932, 40, 207
 */
export function combineSignals(species: MethodSpecies, measured: readonly MeasuredSignal[]): CombinedSignals | undefined {
  const usable = measured.filter(
    (signal) => signal.species === species.id && signal.use === 'quantify' && signal.u > 0 && Number.isFinite(signal.area),
  );
  if (usable.length === 0) return undefined;
  const values = usable.map(({ area, u, u0, nuclei }) => ({ value: area / nuclei, u: u / nuclei, u0: u0 / nuclei }));
  const weight = values.reduce((sum, { u }) => sum + u ** -2, 0);
  const mean = values.reduce((sum, { value, u }) => sum + value * u ** -2, 0) / weight;
  const weight0 = values.reduce((sum, { u0 }) => sum + (u0 > 0 ? u0 ** -2 : 0), 0);
  const u0 = weight0 > 0 ? weight0 ** -0.5 : weight ** -0.5;
  if (values.length === 1) return { areaPerNucleus: mean, u: weight ** -0.5, u0 };
  const agreement = values.reduce((sum, { value, u }) => sum + ((value - mean) / u) ** 2, 0) / (values.length - 1);
  return { areaPerNucleus: mean, u: weight ** -0.5 * Math.max(1, Math.sqrt(agreement)), u0, agreement };
}
