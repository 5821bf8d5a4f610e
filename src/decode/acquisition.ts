import type { Flag } from '../base/flag.js';

/** Where the time of acquisition was found. `none`: the caller falls back on the file's modification time, with a flag. */
export type AcquiredSource = 'long-date' | 'date-and-time' | 'date-only' | 'none';

/** Abscissa of a spectrum as the header states it: a hint only, checked later against the data. */
export interface AxisHint {
  /** Shift of the first and the last point as the header states them, ppm. */
  readonly firstPpm: number;
  readonly lastPpm: number;
}

/** `.SHIFT REFERENCE` (JCAMP-DX 5.01). */
export interface ShiftReference {
  readonly place: 'internal' | 'external' | 'unknown';
  readonly compound: string;
  /** 1-based number of the data point. */
  readonly pointNumber: number;
  readonly shiftPpm: number;
}

/**
 * One acquisition as the file holds it, checked but not processed: the output of `decode`.
 *
 * `fid`: `real` (and `imag` when two channels exist) against time, spacing `dwellS`.
 * `complex-spectrum` / `real-spectrum`: ordinates in the file's order against frequency; `axis` says which end is which.
 */
export interface Acquisition {
  readonly kind: 'fid' | 'complex-spectrum' | 'real-spectrum';
  readonly title: string;
  /** 1-based block number within a compound file; absent for a file with one block. */
  readonly block?: number;
  /** e.g. `1H`, `19F`. */
  readonly nucleus?: string;
  readonly observeMhz?: number;
  /** shape (n), arbitrary units, scaled by the file's factors. */
  readonly real: Float64Array;
  /** shape (n) when present. */
  readonly imag?: Float64Array;
  /** FID: seconds between complex points. */
  readonly dwellS?: number;
  /** Full width of the spectrum in Hz. FID: 1 / dwell. Spectrum: |step| x n. */
  readonly spectralWidthHz: number;
  /** Spectra: shift of first and last point by the header. FID: absent. */
  readonly axis?: AxisHint;
  readonly shiftReference?: ShiftReference;
  readonly solventName?: string;
  /** ISO 8601 UTC, e.g. `2026-03-14T19:31:00Z` (fractions kept when given). */
  readonly acquired?: string;
  readonly acquiredSource: AcquiredSource;
  readonly scans?: number;
  readonly acquisitionMode?: 'simultaneous' | 'sequential' | 'single';
  /** Relaxation delay in seconds when a standard record states it. */
  readonly relaxationDelayS?: number;
  readonly temperatureC?: number;
  /** `.ACQUISITION TIME` as stated. */
  readonly acquisitionTimeS?: number;
  /** `.FIELD` as stated. */
  readonly fieldT?: number;
  /** Texts of the private records that the site asked for, by the name asked; no prototype. Others are not read. */
  readonly privateRecords?: Readonly<Record<string, string>>;
  /** SHA-256 of the decoded numbers and what is needed to place them: equal for the same data under another header. */
  readonly dataSha256: string;
  /** Understood oddities (tolerated, recorded). */
  readonly flags: readonly Flag[];
}
