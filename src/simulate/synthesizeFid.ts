import type { Random } from './random.js';

/** One decaying oscillation. Area 1 is the area of one unit in the transformed spectrum (amplitude at t = 0 equals area). */
export interface FidLine {
  readonly shiftPpm: number;
  readonly area: number;
  /** Full width at half height, Hz, of the Lorentzian. */
  readonly widthHz: number;
}

export interface FidSettings {
  readonly observeMhz: number;
  readonly carrierPpm: number;
  readonly spectralWidthHz: number;
  /** Complex points. */
  readonly points: number;
  readonly phaseDeg?: number;
  /** Points of delayed onset (digital filtering); may be fractional. Signal before it is near zero. */
  readonly onsetPoints?: number;
  /** Seconds of signal lost before the first point (gives a first-order phase). */
  readonly deadTimeS?: number;
  /** rms of the noise in each channel of each point, in units of area. */
  readonly noise?: number;
  /** Frequency grows with time as exp(+i w t) for higher shift when true (default). */
  readonly forward?: boolean;
}

/**
 * Synthesises a complex FID from lines, with truth known exactly.
 *
 * @returns real and imaginary parts, shape (points), first point not halved
 * @source Fourier pair of the Lorentzian: exp(-pi W t) for full width W at half height
 */
export function synthesizeFid(
  lines: readonly FidLine[],
  settings: FidSettings,
  random?: Random,
): { real: Float64Array; imag: Float64Array; dwellS: number } {
  const { observeMhz, carrierPpm, spectralWidthHz, points } = settings;
  const dwellS = 1 / spectralWidthHz;
  const real = new Float64Array(points);
  const imag = new Float64Array(points);
  const onset = settings.onsetPoints ?? 0;
  const first = Math.ceil(onset - 1e-9);
  const phase = ((settings.phaseDeg ?? 0) * Math.PI) / 180;
  const sign = settings.forward === false ? -1 : 1;
  for (const line of lines) {
    const omega = sign * 2 * Math.PI * (line.shiftPpm - carrierPpm) * observeMhz;
    const t0 = (first - onset) * dwellS + (settings.deadTimeS ?? 0);
    const decayStep = Math.exp(-Math.PI * line.widthHz * dwellS);
    const stepRe = decayStep * Math.cos(omega * dwellS);
    const stepIm = decayStep * Math.sin(omega * dwellS);
    const start = line.area * Math.exp(-Math.PI * line.widthHz * t0);
    let re = start * Math.cos(omega * t0 + phase);
    let im = start * Math.sin(omega * t0 + phase);
    for (let k = first; k < points; k += 1) {
      real[k] = real[k]! + re;
      imag[k] = imag[k]! + im;
      const nextRe = re * stepRe - im * stepIm;
      im = re * stepIm + im * stepRe;
      re = nextRe;
    }
  }
  if (settings.noise && random) {
    for (let k = 0; k < points; k += 1) {
      real[k] = real[k]! + settings.noise * random.normal();
      imag[k] = imag[k]! + settings.noise * random.normal();
    }
  }
  return { real, imag, dwellS };
}
