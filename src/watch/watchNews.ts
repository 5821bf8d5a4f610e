import type { Path } from '../record/filePort.js';
import type { LedgerLine } from '../record/ledgerLine.js';
import type { Series } from '../series/series.js';

interface OfRun {
  readonly run: string;
  /** The run's output folder, for `appendTold`. */
  readonly folder: Path;
  readonly lines: readonly LedgerLine[];
  readonly series: Series;
}

/** What a watch has to tell beyond its own screen; given after every pass, so that what could not be delivered is tried again. */
export type WatchNews =
  | ({ readonly kind: 'series' } & OfRun)
  /** No new time point for longer than the run should be silent. */
  | ({ readonly kind: 'silent'; readonly minutes: number; readonly sinceUtc: string } & OfRun)
  /** Work is held up: share away, disk full, a record that cannot be written. */
  | { readonly kind: 'trouble'; readonly code: string; readonly message: string; readonly run?: string };
