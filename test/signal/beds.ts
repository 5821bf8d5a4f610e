import type { MeasuredSignal } from '../../src/signal/measured.js';
import { measureSignals } from '../../src/signal/measureSignals.js';
import { makeRandom, type Random } from '../../src/simulate/random.js';
import type { FidLine } from '../../src/simulate/synthesizeFid.js';
import type { Spectrum } from '../../src/spectrum/spectrum.js';
import { buildMethod } from '../builders/method.js';
import { makeTestSpectrum } from './makeTestSpectrum.js';
import { asSpecies, fidLinesOf, fields, noiseFor, type RandomSignal, randomSignal } from './randomCase.js';

/** One simulated spectrum with three signals far apart, and what was measured. */
export interface BedCase {
  readonly observeMhz: number;
  readonly widthHz: number;
  readonly noise: number;
  readonly spectrum: Spectrum;
  readonly truth: readonly RandomSignal[];
  readonly measured: readonly MeasuredSignal[];
}

export const bedPoints = 8192;
/** Every case spans 12 ppm. */
export const bedSpanPpm = 12;

/** Random patterns, fields of 60 to 600 MHz, widths of 0.5 to 2.5 Hz, phase left over up to 1 degree. */
export function isolatedCase(
  seed: number,
  { low, high, lineBroadening = 0 }: { low: number; high: number; lineBroadening?: number },
): BedCase {
  const random = makeRandom(seed);
  const observeMhz = fields[random.integer(0, fields.length - 1)]!;
  const widthHz = random.between(0.5, 2.5);
  const signalToNoise = Math.exp(random.between(Math.log(low), Math.log(high)));
  const truth = [randomSignal(random, 1.5), randomSignal(random, 4.5), randomSignal(random, 7.5)];
  const lines = truth.flatMap((signal) => fidLinesOf(signal, 1, widthHz, observeMhz));
  const noise = noiseFor(signalToNoise, lines);
  const settings = { seed, noise, observeMhz, lineBroadeningHz: lineBroadening * widthHz };
  return { observeMhz, widthHz, noise, truth, ...measure(lines, truth, settings, random) };
}

/** Two signals 0.02 to 0.08 ppm apart, area ratio down to 1 : 10, and one that is declared but not there. */
export function overlappedCase(seed: number): BedCase & { readonly areas: readonly number[] } {
  const random = makeRandom(seed);
  const observeMhz = fields[random.integer(1, fields.length - 1)]!;
  const widthHz = random.between(0.6, 2);
  const signalToNoise = Math.exp(random.between(Math.log(50), Math.log(2000)));
  const apart = random.between(0.02, 0.08);
  const ratio = Math.exp(random.between(Math.log(0.1), 0));
  const truth = [
    randomSignal(random, 4.5),
    randomSignal(random, Math.round((4.5 + apart) * 100) / 100),
    randomSignal(random, 7.5),
  ];
  const lines = [...fidLinesOf(truth[0]!, 1, widthHz, observeMhz), ...fidLinesOf(truth[1]!, ratio, widthHz, observeMhz)];
  const noise = noiseFor(signalToNoise, lines);
  const areas = [truth[0]!.nuclei, truth[1]!.nuclei * ratio, 0];
  return { observeMhz, widthHz, noise, truth, areas, ...measure(lines, truth, { seed, noise, observeMhz }, random) };
}

/** The first of three signals carries an interloper of 3 % of its area at signal-to-noise 200. */
export function interloperCase(seed: number, share: number): BedCase & { readonly atHz: number } {
  const random = makeRandom(seed);
  const observeMhz = fields[random.integer(0, fields.length - 1)]!;
  const widthHz = random.between(0.5, 2);
  const truth = [randomSignal(random, 1.5), randomSignal(random, 4.5), randomSignal(random, 7.5)];
  const lines = truth.flatMap((signal) => fidLinesOf(signal, 1, widthHz, observeMhz));
  const [first] = truth;
  const offsets = first!.lines.map(({ offsetHz }) => offsetHz);
  const side = random.uniform() < 0.5 ? -1 : 1;
  const atHz =
    offsets.length === 1 ? side * widthHz * random.between(1, 3) : random.between(Math.min(...offsets), Math.max(...offsets));
  lines.push({ shiftPpm: first!.shiftPpm + atHz / observeMhz, area: share * first!.nuclei, widthHz });
  const noise = noiseFor(200, fidLinesOf(first!, 1, widthHz, observeMhz));
  return { observeMhz, widthHz, noise, truth, atHz, ...measure(lines, truth, { seed, noise, observeMhz }, random) };
}

function measure(
  lines: readonly FidLine[],
  truth: readonly RandomSignal[],
  settings: { seed: number; noise: number; observeMhz: number; lineBroadeningHz?: number },
  random: Random,
) {
  const spectrum = makeTestSpectrum(lines, {
    ...settings,
    points: bedPoints,
    spectralWidthHz: settings.observeMhz * bedSpanPpm,
    phaseDeg: random.between(-1, 1),
  });
  // One species a signal: equal couplings by chance must not be taken for coupling partners.
  const species = truth.map((signal, index) => asSpecies(`s${index}`, { a: signal }));
  return { spectrum, measured: measureSignals(spectrum, buildMethod({ species })).signals };
}

/** Share of values within two, and the binomial allowance around a wanted share at three standard deviations. */
export function shareWithinTwo(scores: readonly number[]): number {
  return scores.filter((score) => Math.abs(score) < 2).length / scores.length;
}

export function binomialAllowance(share: number, count: number): number {
  return 3 * Math.sqrt((share * (1 - share)) / count);
}
