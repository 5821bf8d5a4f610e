import type { Amounts, Budget } from '../amount/amounts.js';
import type { Flag } from '../base/flag.js';
import type { Quantity } from '../base/quantity.js';
import type { PointRecord } from '../point/pointRecord.js';

/** One time point as the series sees it: the record plus what only the set of points and the run file can tell. */
export interface SeriesPoint {
  readonly file: string;
  readonly sha256: string;
  readonly block?: number;
  /** ISO 8601 UTC. */
  readonly acquired: string;
  readonly elapsedS: number;
  readonly status: 'accepted' | 'flagged' | 'set-aside';
  readonly flags: readonly Flag[];
  readonly record: PointRecord;
  readonly amounts?: Amounts;
}

/** A file of the run folder that is not a time point, with its reason. */
export interface SeriesInput {
  readonly file: string;
  readonly sha256?: string;
  readonly status: 'set-aside' | 'incomplete' | 'duplicate';
  readonly flags: readonly Flag[];
}

export interface LawFit {
  readonly model: string;
  readonly parameters: Readonly<Record<string, Quantity>>;
  readonly correlation?: readonly (readonly number[])[];
  readonly aicc: number;
  readonly weight: number;
  readonly residuals: readonly number[];
  readonly runTestP?: number;
}

export interface Kinetics {
  /** The chosen law, or absent when the data do not decide. */
  readonly model?: string;
  readonly parameters?: Readonly<Record<string, Quantity>>;
  readonly weights: Readonly<Record<string, number>>;
  readonly fits: readonly LawFit[];
  /** In words: what was concluded and why. */
  readonly words: string;
  /** The fitted conversion curve with its 95 % band, for drawing: shapes (m). */
  readonly curve?: {
    readonly elapsedS: readonly number[];
    readonly value: readonly number[];
    readonly low: readonly number[];
    readonly high: readonly number[];
  };
}

export interface Forecast {
  readonly target: number;
  readonly elapsedS?: number;
  readonly lowS?: number;
  readonly highS?: number;
  readonly confidence: number;
  /** Why a forecast is withheld or wide. */
  readonly words: string;
}

export type RunStateName =
  | 'running'
  | 'target-reached'
  | 'stalled'
  | 'limit-broken'
  | 'new-signal'
  | 'balance-lost'
  | 'silent'
  | 'trouble'
  | 'final';

export interface RunState {
  readonly state: RunStateName;
  /** SHA-256 of the point (or `run`) at which the state began. */
  readonly since: string;
  readonly evidence: string;
}

/** The whole of a run: what `series.json`, the CSV and the report are derived from. */
export interface Series {
  readonly run: string;
  readonly method: { readonly title: string; readonly version: string; readonly sha256: string };
  readonly points: readonly SeriesPoint[];
  readonly inputs: readonly SeriesInput[];
  readonly kinetics?: Kinetics;
  readonly forecast?: Forecast;
  readonly purity?: { readonly massFraction: number; readonly u: number; readonly replicates: number; readonly budget?: Budget };
  readonly unassignedLines?: readonly {
    readonly shiftPpm: number;
    readonly trend: 'grows' | 'fades' | 'steady';
    readonly words: string;
    readonly areas: readonly (number | null)[];
  }[];
  readonly states: readonly RunState[];
  readonly flags: readonly Flag[];
}
