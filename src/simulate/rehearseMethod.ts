import { deriveAmounts } from '../amount/deriveAmounts.js';
import type { Acquisition } from '../decode/acquisition.js';
import type { Method } from '../method/method.js';
import { measureSignals } from '../signal/measureSignals.js';
import { makeSpectrum } from '../spectrum/makeSpectrum.js';
import { makeRandom, type Random } from './random.js';
import { referenceLines } from './referenceLines.js';
import { speciesLines } from './speciesLines.js';
import { synthesizeFid } from './synthesizeFid.js';

export interface RehearsalSettings {
  readonly observeMhz: number;
  /** Height of a one-nucleus singlet at unit amount over the rms noise. */
  readonly signalToNoise: number;
  readonly widthHz: number;
  /** Simulated time points at each level. */
  readonly replicates: number;
  readonly seed: number;
}

/** What was found at one level of conversion. */
export interface RehearsalLevel {
  readonly conversion: number;
  /** Mean of (found - true). */
  readonly bias: number;
  /** Standard deviation of found - true. */
  readonly spread: number;
  /** Mean stated standard uncertainty. */
  readonly statedU: number;
  /** Share of points whose error lies within 2 u. */
  readonly covered: number;
  readonly measured: number;
  readonly points: number;
}

export interface Rehearsal {
  readonly settings: RehearsalSettings;
  readonly levels: readonly RehearsalLevel[];
  /** By signal, in moles per mole of the followed material: 3.3 u0 and 10 u0 (ICH Q2). */
  readonly limits: readonly { readonly signal: string; readonly detection: number; readonly quantitation: number }[];
}

const levelValues = [0, 0.02, 0.1, 0.5, 0.9, 0.98, 1] as const;

/**
 * Rehearses a method: simulates time points of known truth through the whole chain and compares what it says with what
 * is true.
 *
 * @param method   a method with a `conversion` block (without one only the limits are found)
 * @param settings field, signal-to-noise, width, replicates, seed: everything that the result depends on
 * @returns bias, precision and coverage at seven conversions; detection and quantitation limits by signal
 * @source ICH Q2(R2): accuracy, precision, detection and quantitation limit (3.3 and 10 times the standard uncertainty at zero)
 */
export function rehearseMethod(method: Method, settings: RehearsalSettings): Rehearsal {
  const random = makeRandom(settings.seed);
  const limits = new Map<string, number[]>();
  const levels = levelValues.map((conversion) => {
    const found: { error: number; u: number }[] = [];
    for (let k = 0; k < settings.replicates; k += 1) {
      const measurement = simulateOnce(method, conversion, settings, random);
      if (!measurement) continue;
      const result = deriveAmounts(measurement, method, {}).conversion;
      if (result) found.push({ error: result.value - conversion, u: result.u });
      for (const signal of measurement.signals)
        if (signal.use === 'quantify') noteLimit(limits, signal.key, signal.u0 / signal.nuclei);
    }
    return summarise(conversion, found, settings.replicates);
  });
  return { settings, levels, limits: [...limits].map(([signal, values]) => limitsOf(signal, values)) };
}

function simulateOnce(method: Method, conversion: number, settings: RehearsalSettings, random: Random) {
  const { observeMhz, widthHz } = settings;
  const centrePpm = middleOf(method);
  const spectralWidthHz = (spanOf(method) + 4) * observeMhz;
  const points = 2 ** Math.ceil(Math.log2(spectralWidthHz * Math.max(2, 3 / widthHz)));
  const amounts = amountsAt(method, conversion);
  const line = { observeMhz, widthHz, carbonCouplingHz: method.nucleus === '1H' ? 128 : 0 };
  const lines = [...speciesLines(method, amounts, line), ...referenceLines(method, widthHz)];
  const heightOfUnit = 2 / (Math.PI * widthHz);
  const noise = (heightOfUnit / settings.signalToNoise) * (spectralWidthHz / Math.sqrt(points)) * Math.sqrt(2);
  const phaseDeg = random.between(-180, 180);
  const fid = synthesizeFid(lines, { observeMhz, carrierPpm: centrePpm, spectralWidthHz, points, phaseDeg, noise }, random);
  const acquisition: Acquisition = {
    kind: 'fid',
    title: 'rehearsal',
    nucleus: method.nucleus,
    observeMhz,
    real: fid.real,
    imag: fid.imag,
    dwellS: fid.dwellS,
    spectralWidthHz,
    acquiredSource: 'none',
    dataSha256: '',
    flags: [],
  };
  const spectrum = makeSpectrum(acquisition, method);
  return spectrum.ok ? measureSignals(spectrum.value, method) : undefined;
}

/** Amounts at a conversion: the followed species fades, what it forms grows, everything else stays at a half. */
function amountsAt(method: Method, conversion: number): Record<string, number> {
  const { of, to } = method.conversion ?? {};
  const formed = method.species.filter(({ id, role }) =>
    to !== undefined ? id === to : role === 'product' || role === 'intermediate',
  );
  return Object.fromEntries(
    method.species.map((species) => {
      if (species.id === of) return [species.id, 1 - conversion];
      if (formed.includes(species)) return [species.id, (conversion * species.stoichiometry) / formed.length];
      return [species.id, 0.5];
    }),
  );
}

function shiftsOf(method: Method): number[] {
  const shifts = method.species.flatMap(({ signals }) => signals.map(({ shiftPpm }) => shiftPpm));
  return [...shifts, ...referenceLines(method, 1).map(({ shiftPpm }) => shiftPpm)];
}

const middleOf = (method: Method) => (Math.max(...shiftsOf(method)) + Math.min(...shiftsOf(method))) / 2;
const spanOf = (method: Method) => Math.max(...shiftsOf(method)) - Math.min(...shiftsOf(method));

function summarise(conversion: number, found: readonly { error: number; u: number }[], points: number): RehearsalLevel {
  const count = Math.max(1, found.length);
  const bias = found.reduce((sum, { error }) => sum + error, 0) / count;
  const spread = Math.sqrt(found.reduce((sum, { error }) => sum + (error - bias) ** 2, 0) / Math.max(1, count - 1));
  const statedU = found.reduce((sum, { u }) => sum + u, 0) / count;
  const covered = found.filter(({ error, u }) => Math.abs(error) <= 2 * u).length / count;
  return { conversion, bias, spread, statedU, covered, measured: found.length, points };
}

function noteLimit(limits: Map<string, number[]>, signal: string, u0: number): void {
  const values = limits.get(signal) ?? [];
  values.push(u0);
  limits.set(signal, values);
}

function limitsOf(signal: string, values: readonly number[]) {
  const middle = [...values].sort((a, b) => a - b)[Math.floor(values.length / 2)]!;
  return { signal, detection: 3.3 * middle, quantitation: 10 * middle };
}
