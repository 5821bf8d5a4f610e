import type { Result } from '../base/result.js';
import type { Series } from '../series/series.js';
import type { Path } from './filePort.js';
import type { LedgerLine } from './ledgerLine.js';

/** A run for the page that shows all runs. */
export interface RunOnIndex {
  readonly run: string;
  /** Names from the output folder down. */
  readonly names: readonly Buffer[];
  readonly folder: Path;
  readonly lines: readonly LedgerLine[];
}

export interface Derived {
  /** File name to bytes. */
  readonly files: ReadonlyMap<string, Uint8Array>;
  /** What the files show; absent in tests with a stand-in. */
  readonly series?: Series;
}

/** Makes the derived files of a run from its record alone. */
export interface Renderer {
  /** `undefined` when the record holds nothing to derive from. */
  derive(folder: Path, lines: readonly LedgerLine[]): Promise<Result<Derived | undefined>>;
  /** The series alone, without drawing anything. */
  series?(folder: Path, lines: readonly LedgerLine[]): Promise<Result<Series>>;
  /** The page of all runs. */
  index?(runs: readonly RunOnIndex[]): Promise<Result<Uint8Array>>;
}
