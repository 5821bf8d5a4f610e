import type {
  AmendmentEntry,
  ExceptionEntry,
  InputEntry,
  LedgerEntry,
  MethodEntry,
  RenderedEntry,
  RunFileEntry,
} from './ledgerEntry.js';
import type { LedgerLine } from './ledgerLine.js';

type Stamped<T> = T & Pick<LedgerEntry, 'seq' | 'at' | 'host' | 'user' | 'program'>;
export type StampedInput = Stamped<InputEntry>;

/** What the record knows of one name in the run folder. */
export interface FileState {
  readonly file: string;
  readonly key: string;
  /** The content that stands for this name in the series. */
  readonly kept: StampedInput;
  /** The last observation of the name, whatever its content. */
  readonly latest: StampedInput;
  /** Other contents that were seen under this name, captured and waiting for a decision. */
  readonly others: readonly StampedInput[];
}

/** A ledger read from first to last: where the run stands. */
export interface RunState {
  readonly run: string;
  readonly revisions: readonly Stamped<MethodEntry>[];
  /** The revision in use. */
  readonly method?: Stamped<MethodEntry>;
  readonly runFile?: Stamped<RunFileEntry>;
  /** By the bytes of the name. */
  readonly files: ReadonlyMap<string, FileState>;
  /** The last result of each content under each method: `<sha256> <method sha256>`. */
  readonly results: ReadonlyMap<string, StampedInput>;
  readonly amendments: readonly Stamped<AmendmentEntry>[];
  readonly exceptions: readonly Stamped<ExceptionEntry>[];
  readonly rendered?: Stamped<RenderedEntry>;
  readonly told: ReadonlySet<string>;
  /** How often measuring a content died with its worker. */
  readonly deaths: ReadonlyMap<string, number>;
}

interface Draft {
  run: string;
  revisions: Stamped<MethodEntry>[];
  method?: Stamped<MethodEntry>;
  runFile?: Stamped<RunFileEntry>;
  files: Map<string, FileState>;
  results: Map<string, StampedInput>;
  amendments: Stamped<AmendmentEntry>[];
  exceptions: Stamped<ExceptionEntry>[];
  rendered?: Stamped<RenderedEntry>;
  told: Set<string>;
  deaths: Map<string, number>;
}

/** Folds the entries of a ledger; a pure function of its lines. */
export function foldLedger(lines: readonly LedgerLine[]): RunState {
  const draft: Draft = {
    run: '',
    revisions: [],
    files: new Map(),
    results: new Map(),
    amendments: [],
    exceptions: [],
    told: new Set(),
    deaths: new Map(),
  };
  for (const { entry } of lines) foldEntry(draft, entry);
  return draft;
}

function foldEntry(draft: Draft, entry: LedgerEntry): void {
  switch (entry.kind) {
    case 'opened':
      draft.run = entry.run;
      return;
    case 'method':
      draft.revisions.push(entry);
      if (entry.state === 'used') draft.method = entry;
      return;
    case 'run-file':
      draft.runFile = entry;
      return;
    case 'input':
      foldInput(draft, entry);
      return;
    case 'amendment':
      draft.amendments.push(entry);
      if (entry.action === 'restore') foldRestore(draft, entry);
      return;
    case 'exception':
      draft.exceptions.push(entry);
      if (entry.name === 'measuring-died' && entry.sha256 !== undefined)
        draft.deaths.set(entry.sha256, (draft.deaths.get(entry.sha256) ?? 0) + 1);
      return;
    case 'rendered':
      draft.rendered = entry;
      return;
    case 'told':
      if (entry.state === 'delivered') draft.told.add(entry.key);
      return;
    default:
      // An entry of a later program: kept in the chain, not understood here.
      return;
  }
}

/** The bytes of a recorded name, one character a byte. */
export function nameKeyOf(entry: Pick<InputEntry, 'file' | 'fileBase64'>): string {
  return Buffer.from(entry.fileBase64 ?? entry.file, entry.fileBase64 !== undefined ? 'base64' : 'utf8').toString('latin1');
}

export function resultKey(sha256: string, methodSha256: string): string {
  return `${sha256} ${methodSha256}`;
}

function foldInput(draft: Draft, entry: StampedInput): void {
  const key = nameKeyOf(entry);
  if (entry.sha256 !== undefined && entry.methodSha256 !== undefined && entry.state !== 'incomplete')
    draft.results.set(resultKey(entry.sha256, entry.methodSha256), entry);
  const before = draft.files.get(key);
  if (before === undefined) {
    draft.files.set(key, { file: entry.file, key, kept: entry, latest: entry, others: [] });
    return;
  }
  const isSameContent = entry.sha256 !== undefined && entry.sha256 === before.kept.sha256;
  // A usable content keeps its name until a person decides; anything else gives way to what came later.
  if (isSameContent || before.kept.state !== 'measured') {
    const others = before.others.filter(({ sha256 }) => sha256 !== entry.sha256);
    draft.files.set(key, { ...before, kept: entry, latest: entry, others });
    return;
  }
  const isContent = entry.state === 'measured' || entry.state === 'set-aside';
  const others = isContent ? [...before.others.filter(({ sha256 }) => sha256 !== entry.sha256), entry] : before.others;
  draft.files.set(key, { ...before, latest: entry, others });
}

/** Restoring a content that lost its name to an earlier one decides for it. */
function foldRestore(draft: Draft, { point }: AmendmentEntry): void {
  for (const [key, state] of draft.files) {
    const chosen = state.others.find(({ sha256 }) => sha256 === point);
    if (chosen === undefined) continue;
    const others = [...state.others.filter((other) => other !== chosen), state.kept];
    draft.files.set(key, { ...state, kept: chosen, others });
  }
}
