import type { Flag } from '../base/flag.js';

/** What one processing step did: printed in the report, stored in the point record. Plain JSON. */
export interface StepRecord {
  readonly step: string;
  readonly parameters: Readonly<Record<string, number | string | boolean | readonly number[]>>;
}

/**
 * A phased, flat, referenced spectrum. Index 0 is the highest shift: `shiftPpm(i) = firstPpm - i * stepPpm`.
 * Scale: the sum over points of `real` times `stepHz` is an area (arbitrary units x Hz).
 */
export interface Spectrum {
  readonly nucleus: string;
  readonly observeMhz: number;
  /** shape (n), arbitrary units, baseline near zero. */
  readonly real: Float64Array;
  /** shape (n), the dispersive partner; present unless the input was real and in phase. */
  readonly imag?: Float64Array;
  readonly firstPpm: number;
  /** > 0 */
  readonly stepPpm: number;
  /** stepPpm * observeMhz, > 0. */
  readonly stepHz: number;
  /** rms noise of one real point in a signal-free place. */
  readonly noise: number;
  /**
   * Autocorrelation of the noise of `real` at lags 0, 1, 2 ... points; entry 0 is 1. Known from window and zero filling
   * for a FID, estimated from signal-free places for a spectrum. Negligible (taken 0) beyond its end.
   */
  readonly noiseCorrelation: Float64Array;
  /** Standard uncertainty of the local baseline level, same units as `real`; adds to area uncertainty as u x width. */
  readonly baselineU: number;
  /**
   * FID input: seconds of signal behind the spectrum (recorded points after the onset x dwell, before zero filling). A line that has
   * not died out by then carries the ripple of the cut, which the fit models. Absent when not known.
   */
  readonly acquisitionS?: number;
  readonly reference: ReferenceResult;
  readonly quality: {
    readonly phaseDeg: readonly [number, number];
    readonly onsetPoints?: number;
    readonly referenceWidthHz?: number;
    /** Fitted asymmetry of the reference line; 0 is symmetric. */
    readonly referenceAsymmetry?: number;
  };
  readonly steps: readonly StepRecord[];
  readonly flags: readonly Flag[];
}

export interface ReferenceResult {
  /** What pinned the axis: the method's reference, or the next best one, named. `none`: header or search only. */
  readonly used: string;
  readonly shiftPpm: number;
  /** Full width at half height of the fitted reference line, Hz. */
  readonly widthHz?: number;
  /** Correction applied to the axis found before, ppm. */
  readonly movedPpm: number;
}
