import type { MeasuredSignal } from './measured.js';

/** Standard uncertainties and relative difference from which signals of one species contradict each other. */
const scoreMin = 5;
const differenceMin = 0.05;
/** Relaxation, tails and line shapes leave this much between signals of one species even when all is well (common practice). */
const usualU = 0.01;

/**
 * Compares every signal with the other signals of its species: the areas per nucleus must agree. What lies exactly under a
 * singlet changes nothing but this ratio.
 *
 * @returns the signals with `ratioToOthers`, and words where the ratio contradicts the pattern's good fit
 * @source  weighted mean (textbook); u of a ratio by the delta method
 */
export function compareWithOthers(signals: readonly MeasuredSignal[]): MeasuredSignal[] {
  return signals.map((signal) => {
    if (!counts(signal)) return signal;
    const others = signals.filter((other) => other !== signal && other.species === signal.species && counts(other));
    if (others.length === 0) return signal.declared === 's' && signal.verdict === 'matches' ? identityByShift(signal) : signal;
    let weights = 0;
    let sum = 0;
    for (const { area, u, nuclei } of others) {
      const perNucleus = area / nuclei;
      const weight = 1 / Math.hypot(u / nuclei, usualU * perNucleus) ** 2;
      weights += weight;
      sum += weight * perNucleus;
    }
    const mean = sum / weights;
    const value = signal.area / signal.nuclei / mean;
    const u = value * Math.hypot(signal.u / signal.area, 1 / Math.sqrt(weights) / mean, usualU);
    const ratioToOthers = { value: round(value), u: round(u) };
    const contradicts = Math.abs(value - 1) > Math.max(scoreMin * u, differenceMin);
    const words = contradicts
      ? `${signal.words}; area per nucleus ${value.toFixed(2)} times that of the species' other signals`
      : signal.words;
    return { ...signal, ratioToOthers, words };
  });
}

/** Whether a signal can be compared: measured by its own pattern and clear of the noise. */
function counts({ verdict, use, area, u, declared }: MeasuredSignal): boolean {
  return use !== 'ignore' && (verdict === 'matches' || verdict === 'crowded') && area > 5 * u && !/m|br/.test(declared);
}

function identityByShift(signal: MeasuredSignal): MeasuredSignal {
  return { ...signal, words: `${signal.words}; identity rests on the shift alone` };
}

function round(value: number): number {
  return Number(value.toPrecision(4));
}
