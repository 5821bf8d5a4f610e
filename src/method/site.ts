/** Where an event is told. Secrets come from the environment: only the names of variables stand here. */
export interface TellEntry {
  readonly on: readonly string[];
  readonly webhook?: string;
  readonly tokenEnv?: string;
  readonly mail?: {
    readonly to: readonly string[];
    readonly server: string;
    readonly from?: string;
    readonly user?: string;
    readonly passwordEnv?: string;
    readonly attachReport?: boolean;
  };
  readonly file?: string;
}

/** The site file (`kinetrail.yaml`), normalised. */
export interface SiteFile {
  readonly runs: readonly { readonly match: string; readonly method: string }[];
  readonly settleS?: number;
  readonly pollS?: number;
  readonly workers?: number;
  readonly silentAfterMin?: number;
  readonly tell: readonly TellEntry[];
}
