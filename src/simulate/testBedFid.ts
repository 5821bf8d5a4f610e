import type { FidLine } from './synthesizeFid.js';

/** What all lines of one spectrum share: the shim makes each line the same sum of shifted copies of itself. */
export interface BedShape {
  readonly parts: readonly { readonly offsetHz: number; readonly share: number }[];
  /** Drift of the field during the acquisition, Hz per second. */
  readonly driftHzPerS: number;
}

export interface BedTiming {
  readonly observeMhz: number;
  readonly carrierPpm: number;
  readonly dwellS: number;
  /** Complex points. */
  readonly points: number;
  /** Index of time zero: the delayed onset less the points lost to dead time; may be fractional, and below zero. */
  readonly originPoints: number;
  /** `sudden`: nothing before time zero; `filtered`: the build-up of a linear-phase digital filter about time zero. */
  readonly onset: 'sudden' | 'filtered';
  readonly phaseRad: number;
  /** Whether a higher shift turns as exp(+i w t). */
  readonly isForward: boolean;
}

interface Complex {
  readonly real: Float64Array;
  readonly imag: Float64Array;
}

/**
 * The noise-free FID of a test case, as a receiver would hand it over.
 *
 * @returns shape (points) each
 * @source sums of exp((2 pi i f - pi W) t); the digital filter is a Kaiser-windowed sinc of twice the onset's length
 */
export function bedFid(lines: readonly FidLine[], shape: BedShape, timing: BedTiming): Complex {
  const { points, originPoints, dwellS, phaseRad, onset } = timing;
  const first = Math.max(0, Math.ceil(originPoints - 1e-9));
  const out = sampleSignal(lines, shape, timing, first, originPoints, points);
  if (onset === 'filtered') addBuildUp(out, lines, timing);
  const [c, s] = [Math.cos(phaseRad), Math.sin(phaseRad)];
  const sign = timing.isForward ? 1 : -1;
  for (let k = 0; k < points; k += 1) {
    const [re, im] = [out.real[k]!, sign * out.imag[k]!];
    out.real[k] = re * c - im * s;
    out.imag[k] = re * s + im * c;
  }
  void dwellS;
  return out;
}

/** The ideal FID: in phase, sampled from time zero on. Its transform, first point halved, is the truth of the spectrum. */
export function idealFid(lines: readonly FidLine[], shape: BedShape, timing: BedTiming, points: number): Complex {
  const out = sampleSignal(lines, shape, { ...timing, points }, 0, 0, points);
  if (!timing.isForward) for (let k = 0; k < points; k += 1) out.imag[k] = -out.imag[k]!;
  return out;
}

function sampleSignal(
  lines: readonly FidLine[],
  shape: BedShape,
  timing: BedTiming,
  first: number,
  origin: number,
  points: number,
): Complex {
  const { observeMhz, carrierPpm, dwellS } = timing;
  const real = new Float64Array(points);
  const imag = new Float64Array(points);
  const startS = (first - origin) * dwellS;
  for (const line of lines) {
    const omega = 2 * Math.PI * (line.shiftPpm - carrierPpm) * observeMhz;
    const decay = Math.exp(-Math.PI * line.widthHz * dwellS);
    const [stepRe, stepIm] = [decay * Math.cos(omega * dwellS), decay * Math.sin(omega * dwellS)];
    const start = line.area * Math.exp(-Math.PI * line.widthHz * startS);
    let [re, im] = [start * Math.cos(omega * startS), start * Math.sin(omega * startS)];
    const end = Math.min(points, first + Math.ceil(9 / (Math.PI * line.widthHz * dwellS)) + 64);
    for (let k = first; k < end; k += 1) {
      real[k] = real[k]! + re;
      imag[k] = imag[k]! + im;
      const next = re * stepRe - im * stepIm;
      im = re * stepIm + im * stepRe;
      re = next;
    }
  }
  modulate({ real, imag }, shape, first, startS, dwellS);
  return { real, imag };
}

/** Multiplies by what shim and drift do to every line alike; 1 at time zero. */
function modulate({ real, imag }: Complex, shape: BedShape, first: number, startS: number, dwellS: number): void {
  for (let k = first; k < real.length; k += 1) {
    const t = startS + (k - first) * dwellS;
    let [re, im] = [0, 0];
    for (const { offsetHz, share } of shape.parts) {
      re += share * Math.cos(2 * Math.PI * offsetHz * t);
      im += share * Math.sin(2 * Math.PI * offsetHz * t);
    }
    const turn = Math.PI * shape.driftHzPerS * t * t;
    const [c, s] = [Math.cos(turn), Math.sin(turn)];
    const [gr, gi] = [re * c - im * s, re * s + im * c];
    const [x, y] = [real[k]!, imag[k]!];
    real[k] = x * gr - y * gi;
    imag[k] = x * gi + y * gr;
  }
}

const substeps = 16;

/** Replaces the sudden start by the step response of the filter at each line's own frequency. */
function addBuildUp({ real, imag }: Complex, lines: readonly FidLine[], timing: BedTiming): void {
  const { originPoints, observeMhz, carrierPpm, dwellS } = timing;
  const reach = Math.floor(originPoints);
  const kernel = kaiserSinc(reach);
  const from = Math.max(0, Math.ceil(originPoints - reach));
  const to = Math.min(real.length - 1, Math.floor(originPoints + reach));
  for (const line of lines) {
    const turns = (line.shiftPpm - carrierPpm) * observeMhz * dwellS;
    const response = stepResponse(kernel, reach, turns);
    for (let k = from; k <= to; k += 1) {
      const t = k - originPoints;
      const at = Math.round((t + reach) * substeps);
      const isAfter = t >= 0;
      const area = line.area * Math.exp(-Math.PI * line.widthHz * Math.max(0, t) * dwellS);
      const [c, s] = [Math.cos(2 * Math.PI * turns * t), Math.sin(2 * Math.PI * turns * t)];
      const gr = response.real[at]! - (isAfter ? 1 : 0);
      const gi = response.imag[at]!;
      real[k] = real[k]! + area * (gr * c - gi * s);
      imag[k] = imag[k]! + area * (gr * s + gi * c);
    }
  }
}

function kaiserSinc(reach: number): Float64Array {
  const size = 2 * reach * substeps + 1;
  const kernel = new Float64Array(size);
  const beta = 6;
  for (let i = 0; i < size; i += 1) {
    const v = i / substeps - reach;
    const sinc = v === 0 ? 1 : Math.sin(Math.PI * v) / (Math.PI * v);
    kernel[i] = (sinc * bessel0(beta * Math.sqrt(Math.max(0, 1 - (v / reach) ** 2)))) / bessel0(beta) / substeps;
  }
  return kernel;
}

/** Modified Bessel function of order zero, by its series. */
function bessel0(x: number): number {
  let [sum, term] = [1, 1];
  for (let k = 1; k < 40; k += 1) {
    term *= (x / 2 / k) ** 2;
    sum += term;
  }
  return sum;
}

function stepResponse(kernel: Float64Array, reach: number, turns: number): Complex {
  const real = new Float64Array(kernel.length);
  const imag = new Float64Array(kernel.length);
  let [re, im] = [0, 0];
  for (let i = 0; i < kernel.length; i += 1) {
    const v = i / substeps - reach;
    re += kernel[i]! * Math.cos(2 * Math.PI * turns * v);
    im -= kernel[i]! * Math.sin(2 * Math.PI * turns * v);
    real[i] = re;
    imag[i] = im;
  }
  const last = kernel.length - 1;
  const norm = Math.hypot(real[last]!, imag[last]!);
  return { real: real.map((value) => value / norm), imag: imag.map((value) => value / norm) };
}
