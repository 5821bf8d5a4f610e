import type { Method, RunFile } from '../method/method.js';
import type { Series } from '../series/series.js';

/** Everything that a report is drawn from: rebuilt from the record alone. */
export interface ReportInput {
  readonly series: Series;
  readonly method: Method;
  readonly methodText: string;
  readonly runFile: RunFile;
  readonly head: { readonly seq: number; readonly hash: string };
  /** Time of the last ledger entry that carries data: never the clock. */
  readonly createdUtc: string;
  readonly program: string;
  readonly changes: readonly {
    readonly at: string;
    readonly kind: string;
    readonly what: string;
    readonly by: string;
    readonly because: string;
  }[];
  readonly exceptions: readonly { readonly at: string; readonly kind: string; readonly message: string }[];
  readonly files: readonly { readonly file: string; readonly sha256: string; readonly state: string }[];
  readonly attachments: { readonly seriesJson: string; readonly ledgerText: string };
}
