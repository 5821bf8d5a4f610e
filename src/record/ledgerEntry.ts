import type { Flag } from '../base/flag.js';

/** Who and what wrote an entry. */
export interface Writer {
  readonly host: string;
  readonly user: string;
  readonly program: string;
}

/** The first entry of every record. */
export interface OpenedEntry {
  readonly kind: 'opened';
  readonly format: 'kinetrail.ledger/1';
  readonly run: string;
}

/** A revision of the method: its bytes are stored in `raw/` under their hash. */
export interface MethodEntry {
  readonly kind: 'method';
  readonly sha256: string;
  readonly file: string;
  readonly title: string;
  readonly version: string;
  readonly revision: number;
  /** `used` from here on, or `noticed`: the file was edited while the run goes on with its captured method. */
  readonly state: 'used' | 'noticed';
  readonly by?: string;
  readonly because?: string;
}

/** The facts about the batch as they stand now; bytes in `raw/`. */
export interface RunFileEntry {
  readonly kind: 'run-file';
  readonly file: string;
  readonly sha256: string;
}

export type InputState = 'measured' | 'set-aside' | 'incomplete' | 'vanished';

/** What became of one file: the commit point of a time point. */
export interface InputEntry {
  readonly kind: 'input';
  readonly file: string;
  /** Present when the name is not UTF-8: its bytes. */
  readonly fileBase64?: string;
  readonly state: InputState;
  readonly sha256?: string;
  readonly sizeBytes?: number;
  /** Modification time on the share when it was taken in, nanoseconds since 1970 as text. */
  readonly modifiedNs?: string;
  readonly inode?: string;
  readonly methodSha256?: string;
  /** Version that measured; differs from the writer's when a stored result was adopted. */
  readonly engine?: string;
  /** Hashes of the point records in `points/`, one a spectrum block. */
  readonly points?: readonly string[];
  readonly flags?: readonly Flag[];
  /** Measured again on request: the reason stands in the amendment that asked for it. */
  readonly again?: true;
}

/** A signed-off change. `point` is the SHA-256 of the raw file; absent for a comment on the whole run. */
export interface AmendmentEntry {
  readonly kind: 'amendment';
  readonly action: 'set-aside' | 'restore' | 'comment' | 'use-method' | 'measure-again' | 'adopt-objects';
  readonly point?: string;
  readonly block?: number;
  readonly file?: string;
  readonly by: string;
  readonly because: string;
}

export type ExceptionName =
  | 'outage'
  | 'takeover'
  | 'recovered'
  | 'clock-jump'
  | 'measuring-died'
  | 'gone'
  | 'method-invalid'
  | 'run-file-invalid';

/** Something out of the ordinary that a reviewer wants to know. */
export interface ExceptionEntry {
  readonly kind: 'exception';
  readonly name: ExceptionName;
  readonly message: string;
  readonly file?: string;
  readonly files?: readonly string[];
  readonly sha256?: string;
  readonly sinceUtc?: string;
  readonly seconds?: number;
}

/** Derived files as written; changes no number and does not move the head that carries data. */
export interface RenderedEntry {
  readonly kind: 'rendered';
  /** Sequence number of the last data entry that the files show. */
  readonly of: number;
  readonly files: Readonly<Record<string, string>>;
}

/** A message that was sent, or was tried. */
export interface ToldEntry {
  readonly kind: 'told';
  readonly event: string;
  readonly to: string;
  readonly state: 'delivered' | 'failed';
  readonly key: string;
  readonly message?: string;
}

export type EntryBody =
  | OpenedEntry
  | MethodEntry
  | RunFileEntry
  | InputEntry
  | AmendmentEntry
  | ExceptionEntry
  | RenderedEntry
  | ToldEntry;

/** A line of the ledger: what happened, where it stands in the chain, when and by whom. */
export type LedgerEntry = EntryBody &
  Writer & {
    readonly seq: number;
    /** SHA-256 of the line before; zeros for the first. */
    readonly prev: string;
    /** UTC. */
    readonly at: string;
    /** Local time minus UTC where it was written, minutes. */
    readonly utcOffsetMin: number;
  };

export const firstPrev = '0'.repeat(64);

const dataKinds: ReadonlySet<EntryBody['kind']> = new Set(['opened', 'method', 'run-file', 'input', 'amendment', 'exception']);

/** Whether an entry changes what the series or the report shows: the last such entry is the head that a report prints. */
export function carriesData(entry: EntryBody): boolean {
  return dataKinds.has(entry.kind);
}
