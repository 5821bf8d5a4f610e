import type { Acquisition } from '../decode/acquisition.js';
import type { Processing } from '../method/method.js';
import type { ComplexSpectrum } from './complexSpectrum.js';
import { inverseFourier, powerOfTwoFrom } from './fastFourier.js';
import { findOnset } from './findOnset.js';
import { hilbertPartner } from './hilbertPartner.js';
import { noiseCorrelationOf } from './noiseCorrelationOf.js';
import type { StepRecord } from './spectrum.js';
import { buildsUp, transformFid } from './transformFid.js';

/** A complex spectrum before phasing, with what is known of how it came about. */
export interface Raw {
  readonly spectrum: ComplexSpectrum;
  /** The same under a stronger window and without zero filling: lines are found and phases measured here. */
  readonly analysis: ComplexSpectrum;
  /** By how much lines are broader in `analysis`, Hz. */
  readonly analysisBroadeningHz: number;
  /** Independent points behind `analysis`. */
  readonly analysisIndependent: number;
  readonly onsetPoints?: number;
  /** Where time zero may lie, points from the start of the FID. */
  /** A two-channel FID: its first point after the onset, as it would stand in the spectrum with full weight. */
  readonly firstPoint?: { readonly real: number; readonly imag: number };
  /** Points before zero filling: what noise is independent in. */
  readonly independentPoints: number;
  readonly originRange?: readonly [number, number];
  /** How a first-order phase acts: through each line (a shift in time), or line by line (points are missing). */
  readonly turnsThrough: boolean;
  /** Known for a FID, measured later for a spectrum. */
  readonly noiseCorrelation?: Float64Array;
  readonly acquisitionS?: number;
  /** True when the input was real only: it may be in phase already. */
  readonly isReal: boolean;
  readonly steps: readonly StepRecord[];
}

/** Window time constant: the exponential has fallen to exp(-pi x 0.6) = 15 % at the end of the acquisition. */
const matchedShare = 0.6;
/** Under the window of the analysis the cut at the end of a FID leaves no ripple worth the name: exp(-pi x 1.8) = 0.35 %. */
const analysisShare = 1.8;
/** So much of a FID says all about phase and places of lines; more would only add noise. */
const analysisS = 2.5;
const analysisPointsMin = 2048;

/**
 * Brings any acquisition to a complex spectrum, lowest index lowest frequency: a FID is windowed and transformed, a complex
 * spectrum is taken as it is, a real one gets its dispersive partner.
 *
 * @param acquisition as decoded; at least 16 points
 * @param processing  line broadening, zero filling
 * @param onsetPoints the site's own word for the onset, when given
 */
export function complexFrom(acquisition: Acquisition, processing: Processing, onsetPoints?: number): Raw {
  return acquisition.kind === 'fid' ? fromFid(acquisition, processing, onsetPoints) : fromSpectrum(acquisition);
}

function fromFid(acquisition: Acquisition, processing: Processing, givenOnset: number | undefined): Raw {
  const { real } = acquisition;
  const imag = acquisition.imag ?? new Float64Array(real.length);
  const dwellS = acquisition.dwellS ?? 1 / acquisition.spectralWidthHz;
  const onset =
    givenOnset === undefined
      ? findOnset(real, imag)
      : { wholePoints: Math.round(givenOnset), rangePoints: [givenOnset - 1.5, givenOnset + 1.5] as const };
  const onsetPoints = onset.wholePoints;
  const kept = real.length - onsetPoints;
  const acquisitionS = kept * dwellS;
  const lineBroadeningHz =
    processing.lineBroadeningHz === 'matched' ? Math.min(5, matchedShare / acquisitionS) : processing.lineBroadeningHz;
  const { zeroFilling } = processing;
  const keepsEarly = buildsUp(real, imag, onsetPoints);
  const transform = (broadeningHz: number, factor: number, end: number) => {
    const settings = { onsetPoints, lineBroadeningHz: broadeningHz, zeroFilling: factor, keepsEarly };
    const whole = transformFid(real.subarray(0, end), imag.subarray(0, end), dwellS, settings);
    return isReal ? upperHalf(whole) : whole;
  };
  const isReal = acquisition.imag === undefined;
  const spectrum = transform(lineBroadeningHz, zeroFilling, real.length);
  const analysisPoints = Math.min(kept, Math.max(analysisPointsMin, Math.ceil(analysisS / dwellS)));
  const analysisHz = Math.max(lineBroadeningHz, analysisShare / (analysisPoints * dwellS));
  const points = powerOfTwoFrom(Math.max(real.length, kept * zeroFilling));
  return {
    spectrum,
    analysis: transform(analysisHz, 1, onsetPoints + analysisPoints),
    analysisIndependent: isReal ? analysisPoints / 2 : analysisPoints,
    analysisBroadeningHz: analysisHz - lineBroadeningHz,
    onsetPoints,
    originRange: onset.rangePoints,
    ...(isReal ? {} : { firstPoint: { real: 2 * dwellS * real[onsetPoints]!, imag: 2 * dwellS * imag[onsetPoints]! } }),
    turnsThrough: keepsEarly,
    independentPoints: isReal ? kept / 2 : kept,
    noiseCorrelation: noiseCorrelationOf(kept, points, Math.PI * lineBroadeningHz * dwellS),
    acquisitionS,
    isReal: false,
    steps: [
      { step: 'onset', parameters: { whole_points: onsetPoints, build_up_kept: keepsEarly, given: givenOnset !== undefined } },
      { step: 'window', parameters: { shape: 'exponential', line_broadening_hz: lineBroadeningHz } },
      { step: 'transform', parameters: { points_in: kept, points_out: points, step_hz: spectrum.stepHz, one_channel: isReal } },
    ],
  };
}

/** A one-channel FID cannot tell the sign of a frequency: its positive half holds everything, at half the amplitude. */
function upperHalf(spectrum: ComplexSpectrum): ComplexSpectrum {
  const half = spectrum.real.length / 2;
  const take = (values: Float64Array) => values.slice(half).map((value) => 2 * value);
  return { real: take(spectrum.real), imag: take(spectrum.imag), stepHz: spectrum.stepHz };
}

function fromSpectrum(acquisition: Acquisition): Raw {
  const isFalling = (acquisition.axis?.firstPpm ?? 1) > (acquisition.axis?.lastPpm ?? 0);
  const ordered = (values: Float64Array) => (isFalling ? values.slice().reverse() : values.slice());
  const real = ordered(acquisition.real);
  const stepHz = acquisition.spectralWidthHz / real.length;
  if (!acquisition.imag) {
    const imag = hilbertPartner(real);
    return {
      spectrum: { real, imag, stepHz },
      analysis: { real, imag, stepHz },
      analysisBroadeningHz: 0,
      analysisIndependent: real.length,
      turnsThrough: true,
      independentPoints: real.length,
      isReal: true,
      steps: [{ step: 'dispersive partner', parameters: { by: 'Hilbert transform' } }],
    };
  }
  const given = ordered(acquisition.imag);
  const isMirrored = !isCausal(real, given);
  const imag = isMirrored ? given.map((value) => -value) : given;
  return {
    spectrum: { real, imag, stepHz },
    analysis: { real, imag, stepHz },
    analysisBroadeningHz: 0,
    analysisIndependent: real.length,
    turnsThrough: true,
    independentPoints: real.length,
    isReal: false,
    steps: [{ step: 'complex spectrum', parameters: { imaginary_sign_turned: isMirrored } }],
  };
}

/** Whether the pair is the transform of a signal that runs forward in time: its energy then lies in the first half. */
function isCausal(real: Float64Array, imag: Float64Array): boolean {
  const n = powerOfTwoFrom(real.length);
  const data = new Float64Array(2 * n);
  for (let i = 0; i < real.length; i += 1) {
    data[2 * i] = real[i]!;
    data[2 * i + 1] = imag[i]!;
  }
  const time = inverseFourier(data);
  let [early, late] = [0, 0];
  for (let k = 0; k < n; k += 1) {
    const energy = time[2 * k]! ** 2 + time[2 * k + 1]! ** 2;
    if (k < n / 2) early += energy;
    else late += energy;
  }
  return early >= late;
}
