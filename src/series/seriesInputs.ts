import type { Method, RunFile } from '../method/method.js';
import type { PointRecord } from '../point/pointRecord.js';
import type { SeriesInput } from './series.js';

/** A signed-off change to the record, as the ledger holds it. */
export interface Amendment {
  readonly kind: 'set-aside' | 'restore' | 'comment';
  /** SHA-256 of the raw file. */
  readonly point: string;
  readonly block?: number;
  readonly by: string;
  readonly because: string;
  /** ISO 8601 UTC. */
  readonly at: string;
}

/** Everything that a series is a function of: a set of point records, the run file, amendments in their order. */
export interface SeriesInputs {
  readonly run: string;
  readonly method: Method;
  readonly runFile: RunFile;
  readonly points: readonly {
    readonly file: string;
    readonly record: PointRecord;
    /** ISO 8601 UTC; used, and flagged, only when the record holds no time of acquisition. */
    readonly modified?: string;
  }[];
  readonly inputs: readonly SeriesInput[];
  readonly amendments: readonly Amendment[];
}
