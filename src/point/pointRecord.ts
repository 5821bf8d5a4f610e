import type { Flag } from '../base/flag.js';
import type { Measurement } from '../signal/measured.js';
import type { ReferenceResult, StepRecord } from '../spectrum/spectrum.js';

/**
 * The result of one time point: a function of (raw bytes, method bytes, program version) alone. Plain JSON, stored in
 * `points/`, named by the hash of its canonical form.
 */
export interface PointRecord {
  readonly format: 'kinetrail.point/1';
  readonly program: string;
  /** SHA-256 of the raw file. */
  readonly sha256: string;
  readonly methodSha256: string;
  /** 1-based block number of a compound file. */
  readonly block?: number;
  readonly title: string;
  /** ISO 8601 UTC; absent when the file holds no time (the watcher then supplies the modification time from the ledger). */
  readonly acquired?: string;
  readonly acquiredSource: string;
  readonly dataSha256: string;
  readonly kind: string;
  readonly nucleus?: string;
  readonly observeMhz?: number;
  readonly status: 'accepted' | 'flagged' | 'set-aside';
  readonly flags: readonly Flag[];
  readonly quality?: {
    readonly signalToNoise: number;
    readonly referenceWidthHz?: number;
    readonly phaseDeg: readonly [number, number];
    readonly onsetPoints?: number;
    readonly noise: number;
  };
  readonly reference?: ReferenceResult;
  readonly steps: readonly StepRecord[];
  readonly measurement?: Measurement;
  /** Whole spectrum thinned by minimum and maximum per column, for the report. */
  readonly overview?: {
    readonly firstPpm: number;
    readonly lastPpm: number;
    readonly low: readonly number[];
    readonly high: readonly number[];
  };
}
