import { makeSpectrum } from '../spectrum/makeSpectrum.js';
import { rotatePhase } from '../spectrum/rotatePhase.js';
import type { Spectrum } from '../spectrum/spectrum.js';
import { transformFid } from '../spectrum/transformFid.js';
import type { BedCase } from './testBed.js';
import { idealFid } from './testBedFid.js';

/** How far one case came from its truth. Absent values could not be asked of the case. */
export interface BedScore {
  readonly seed: number;
  readonly signalToNoise: number;
  /** Code of the problem when the station refused. */
  readonly refused?: string;
  readonly flags: readonly string[];
  /** Largest phase error at a line above 20 sigma, degrees. */
  readonly phaseErrorDeg?: number;
  readonly onsetErrorPoints?: number;
  /** A delayed onset taken for none, or the reverse. */
  readonly isOnsetMistaken?: boolean;
  /** Signal-free places, in units of the noise. */
  readonly baselineMean?: number;
  readonly baselineRms?: number;
  /** Bias of the fitted area of a signal of 20 sigma height, rms over signal-free places, as a share. */
  readonly areaBias?: number;
  /** Stated over true noise. */
  readonly noiseRatio?: number;
  readonly axis?: 'right' | 'wrong';
  /** Error of the pinned axis, Hz, when the named reference pinned it. */
  readonly referenceErrorHz?: number;
}

/** What was done to a case, read back from its steps. */
interface Done {
  readonly onsetPoints: number;
  readonly keepsEarly: boolean;
  readonly lineBroadeningHz: number;
  readonly zeroRad: number;
  readonly firstRad: number;
  readonly isRising: boolean;
}

/**
 * Runs one case through the spectrum station and holds the result against its truth.
 *
 * @source truth: the same lines sampled from time zero in phase; the noise that was added, taken through the same linear steps
 */
export function scoreBedCase(bedCase: BedCase): BedScore {
  const { seed, signalToNoise, acquisition, method } = bedCase;
  const result = makeSpectrum(acquisition, method);
  if (!result.ok) return { seed, signalToNoise, refused: result.problem.code, flags: [] };
  const spectrum = result.value;
  const done = readBack(spectrum);
  const sigma = trueNoise(bedCase, done);
  const truth = trueReal(bedCase, done);
  const error = errorOf(spectrum, truth, noiseReal(bedCase, done), done.isRising);
  return {
    seed,
    signalToNoise,
    flags: spectrum.flags.map(({ code }) => code),
    ...phaseScore(bedCase, done, truth, sigma),
    ...onsetScore(bedCase, spectrum),
    ...baselineScore(bedCase, spectrum, orient(truth, done.isRising), error, sigma, done),
    ...(sigma > 0 ? { noiseRatio: spectrum.noise / sigma } : {}),
    ...axisScore(bedCase, spectrum, done),
  };
}

function readBack(spectrum: Spectrum): Done {
  const all = new Map(
    spectrum.steps.flatMap(({ step, parameters }) => Object.entries(parameters).map(([k, v]) => [`${step}.${k}`, v])),
  );
  const number = (key: string) => Number(all.get(key) ?? Number.NaN);
  return {
    onsetPoints: number('onset.whole_points'),
    keepsEarly: all.get('onset.build_up_kept') === true,
    lineBroadeningHz: number('window.line_broadening_hz'),
    zeroRad: (number('phase.zero_deg') * Math.PI) / 180,
    firstRad: (number('phase.first_deg') * Math.PI) / 180,
    isRising: all.get('axis.rising') === true,
  };
}

function settingsOf({ method }: BedCase, { onsetPoints, lineBroadeningHz, keepsEarly }: Done) {
  return { onsetPoints, lineBroadeningHz, zeroFilling: method.processing.zeroFilling, keepsEarly };
}

function trueNoise({ noise, timing }: BedCase, { lineBroadeningHz, onsetPoints }: Done): number {
  const rate = 2 * Math.PI * lineBroadeningHz * timing.dwellS;
  const count = timing.points - onsetPoints;
  const power = rate > 1e-12 ? (1 - Math.exp(-rate * count)) / (1 - Math.exp(-rate)) : count;
  return 2 * timing.dwellS * noise.rms * Math.sqrt(power);
}

/** The truth, index 0 the lowest frequency as the receiver saw it. */
function trueReal(bedCase: BedCase, done: Done): Float64Array {
  const { timing, shape, groups } = bedCase;
  const kept = timing.points - done.onsetPoints;
  const ideal = idealFid(
    groups.flatMap(({ lines }) => lines),
    shape,
    timing,
    kept,
  );
  const padded = { real: new Float64Array(timing.points), imag: new Float64Array(timing.points) };
  padded.real.set(ideal.real, done.onsetPoints);
  padded.imag.set(ideal.imag, done.onsetPoints);
  return transformFid(padded.real, padded.imag, timing.dwellS, { ...settingsOf(bedCase, done), keepsEarly: false }).real;
}

function noiseReal(bedCase: BedCase, done: Done): Float64Array {
  const { noise, timing } = bedCase;
  const whole = transformFid(noise.real, noise.imag, timing.dwellS, settingsOf(bedCase, done));
  return rotatePhase(whole, done.zeroRad, done.firstRad).real;
}

const orient = (values: Float64Array, isRising: boolean) => (isRising ? values.slice().reverse() : values);

function errorOf(spectrum: Spectrum, truth: Float64Array, noise: Float64Array, isRising: boolean): Float64Array {
  const n = truth.length;
  return spectrum.real.map((value, i) => {
    const j = isRising ? n - 1 - i : i;
    return value - truth[j]! - noise[j]!;
  });
}

function phaseScore({ groups, timing }: BedCase, done: Done, truth: Float64Array, sigma: number): { phaseErrorDeg?: number } {
  const n = truth.length;
  const turns = done.onsetPoints - timing.originPoints;
  let worst: number | undefined;
  for (const { shiftPpm } of groups.flatMap(({ lines }) => lines)) {
    const x = (timing.isForward ? 1 : -1) * (shiftPpm - timing.carrierPpm) * timing.observeMhz * timing.dwellS;
    const j = Math.round((x + 0.5) * n);
    if (!(Math.max(truth[j - 1] ?? 0, truth[j] ?? 0, truth[j + 1] ?? 0) > 20 * sigma)) continue;
    const trueRad = timing.phaseRad + 2 * Math.PI * turns * x;
    const offRad = done.zeroRad + done.firstRad * x - trueRad;
    const offDeg = (Math.abs(offRad - 2 * Math.PI * Math.round(offRad / (2 * Math.PI))) * 180) / Math.PI;
    worst = Math.max(worst ?? 0, offDeg);
  }
  return worst !== undefined ? { phaseErrorDeg: worst } : {};
}

function onsetScore({ timing }: BedCase, spectrum: Spectrum): { onsetErrorPoints?: number; isOnsetMistaken?: boolean } {
  const found = spectrum.quality.onsetPoints;
  if (found === undefined) return {};
  const isDelayed = timing.originPoints >= 3;
  const isMistaken = isDelayed ? found < 2 : found > 2;
  return { onsetErrorPoints: Math.abs(found - timing.originPoints), isOnsetMistaken: isMistaken };
}

function baselineScore(
  { groups }: BedCase,
  spectrum: Spectrum,
  truth: Float64Array,
  error: Float64Array,
  sigma: number,
  done: Done,
) {
  if (!(sigma > 0)) return {};
  const free: number[] = [];
  const from = Math.round(truth.length * 0.04);
  for (let i = from; i < truth.length - from; i += 1) if (Math.abs(truth[i]!) < 0.5 * sigma) free.push(i);
  if (free.length < 500) return {};
  const mean = free.reduce((sum, i) => sum + error[i]!, 0) / free.length;
  const rms = Math.sqrt(free.reduce((sum, i) => sum + (error[i]! - mean) ** 2, 0) / free.length);
  const narrowHz = Math.min(...groups.flatMap(({ lines }) => lines.map(({ widthHz }) => widthHz))) + done.lineBroadeningHz;
  const level = windowRms(error, free, Math.max(1, Math.round((2 * narrowHz) / spectrum.stepHz)));
  // A line of height H fitted by its shape takes up twice a constant offset: sum L / sum L^2 = 2.
  return { baselineMean: Math.abs(mean) / sigma, baselineRms: rms / sigma, areaBias: (2 * level) / (20 * sigma) };
}

/** rms over windows of 2 reach + 1 points in signal-free places of the mean error in the window. */
function windowRms(error: Float64Array, free: readonly number[], reach: number): number {
  let [sum2, count] = [0, 0];
  for (let k = 0; k + 2 * reach < free.length; k += 2 * reach + 1) {
    if (free[k + 2 * reach]! - free[k]! !== 2 * reach) continue;
    let sum = 0;
    for (let i = free[k]!; i <= free[k + 2 * reach]!; i += 1) sum += error[i]!;
    sum2 += (sum / (2 * reach + 1)) ** 2;
    count += 1;
  }
  return count > 0 ? Math.sqrt(sum2 / count) : Number.NaN;
}

function axisScore({ timing, groups }: BedCase, spectrum: Spectrum, done: Done) {
  const n = spectrum.real.length;
  const middle = done.isRising ? n - 1 - n / 2 : n / 2;
  const offPpm = spectrum.firstPpm - middle * spectrum.stepPpm - timing.carrierPpm;
  const isRight = done.isRising === timing.isForward && Math.abs(offPpm) < 0.05;
  const reference = groups.find(({ key }) => key === 'tetramethylsilane');
  const isPinned = reference !== undefined && spectrum.reference.used === 'tetramethylsilane' && isRight;
  return {
    axis: isRight ? ('right' as const) : ('wrong' as const),
    ...(isPinned ? { referenceErrorHz: Math.abs(offPpm + reference.shiftPpm) * timing.observeMhz } : {}),
  };
}
