import type { MethodSpecies } from '../../src/method/method.js';
import { firstOrderLines } from '../../src/pattern/firstOrderLines.js';
import { parsePattern } from '../../src/pattern/parsePattern.js';
import type { Pattern } from '../../src/pattern/pattern.js';
import type { Random } from '../../src/simulate/random.js';
import type { FidLine } from '../../src/simulate/synthesizeFid.js';
import { buildSpecies } from '../builders/method.js';

export const fields = [60, 90, 200, 300, 400, 500, 600] as const;
const patterns = ['s', 'd', 't', 'q', 'quint', 'sext', 'dd', 'dt', 'td', 'dq', 'ddd'] as const;

/** One signal with its truth: the declared listing and what the spectrum really holds. */
export interface RandomSignal {
  readonly listed: string;
  readonly pattern: Pattern;
  readonly shiftPpm: number;
  readonly nuclei: number;
  readonly lines: readonly { readonly offsetHz: number; readonly share: number }[];
}

/** Draws a pattern with couplings as listed (rounded) and as they are (off by up to 0.05 Hz), and a shift off by some thousandths. */
export function randomSignal(random: Random, aroundPpm: number, only: readonly string[] = patterns): RandomSignal {
  const text = only[random.integer(0, only.length - 1)]!;
  const bare = parsePattern(text, []);
  if (!bare.ok) throw new Error(bare.problem.message);
  const true_ = bare.value.splittings.map((_, k) => random.between(k === 0 ? 6 : 1.5, k === 0 ? 12 : 6));
  true_.sort((a, b) => b - a);
  const listedJ = true_.map((j) => (j + random.between(-0.05, 0.05)).toFixed(1));
  const exact = parsePattern(text, true_);
  if (!exact.ok) throw new Error(exact.problem.message);
  const nuclei = random.integer(1, 3);
  const shiftPpm = aroundPpm + random.between(-0.01, 0.01);
  const couplings = listedJ.length > 0 ? `, J = ${listedJ.join(', ')} Hz` : '';
  const listed = `${aroundPpm.toFixed(2)} (${text}${couplings}, ${nuclei}H)`;
  return { listed, pattern: exact.value, shiftPpm, nuclei, lines: firstOrderLines(exact.value) };
}

export function asSpecies(id: string, signals: Readonly<Record<string, RandomSignal>>): MethodSpecies {
  return buildSpecies(id, Object.fromEntries(Object.entries(signals).map(([key, { listed }]) => [key, listed])));
}

/** The FID lines of a signal, area `nuclei` x amount. */
export function fidLinesOf(signal: RandomSignal, amount: number, widthHz: number, observeMhz: number): FidLine[] {
  return signal.lines.map(({ offsetHz, share }) => ({
    shiftPpm: signal.shiftPpm + offsetHz / observeMhz,
    area: amount * signal.nuclei * share,
    widthHz,
  }));
}

/** Spectrum noise for a wanted signal-to-noise of the tallest line: height of a line is 2 area / (pi width), noise is doubled. */
export function noiseFor(signalToNoise: number, lines: readonly FidLine[]): number {
  const tallest = Math.max(...lines.map(({ area, widthHz }) => (2 * area) / (Math.PI * widthHz)));
  return tallest / signalToNoise / 2;
}
