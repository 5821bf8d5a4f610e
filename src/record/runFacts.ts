import { fail, ok, type Result } from '../base/result.js';
import type { Method, RunFile } from '../method/method.js';
import type { Series } from '../series/series.js';
import { type Amendment, amendmentsOf } from './amendmentsOf.js';
import { joinPath, pathText } from './bytePath.js';
import { deriveRunSeries } from './deriveRunSeries.js';
import { acquiredTimes, type ExceptionFact, exceptionFacts, gapFacts } from './exceptionFacts.js';
import { type FileFact, fileFacts } from './fileFacts.js';
import { type FilePort, type Path, realFilePort } from './filePort.js';
import { dataHeadOf, type Head, ledgerName } from './ledger.js';
import type { MethodEntry } from './ledgerEntry.js';
import { encodeLine, type LedgerLine, parseLedger } from './ledgerLine.js';
import { getRaw } from './objectStore.js';
import { outputProblem, recordProblem } from './recordProblem.js';
import { loadContents, type RunContents } from './runContents.js';
import { readLedgerBytes } from './runRecord.js';
import { foldLedger, type RunState } from './runState.js';

export interface RevisionFact
  extends Pick<MethodEntry, 'revision' | 'sha256' | 'title' | 'version' | 'state' | 'by' | 'because'> {
  readonly at: string;
  readonly seq: number;
}

/** Everything that a report shows, rebuilt from the record alone: the same record gives the same facts. */
export interface RunFacts {
  readonly run: string;
  readonly method: Method;
  /** The method's own text, as captured. */
  readonly methodText: string;
  readonly methodRevision: number;
  /** Every revision seen; `noticed` ones are captured and not in use. */
  readonly revisions: readonly RevisionFact[];
  readonly runFile: RunFile;
  readonly series: Series;
  /** Of the last entry that carries data: what the report prints and `verify --head` expects. */
  readonly head: Head;
  readonly amendments: readonly Amendment[];
  /** Late, replaced, vanished and duplicate files, outages, takeovers, recoveries ... in the order of the ledger. */
  readonly exceptions: readonly ExceptionFact[];
  /** Every content seen under every name with its fate. */
  readonly files: readonly FileFact[];
  /** Time of the last entry that carries data, UTC: never the clock. */
  readonly createdUtc: string;
  /** Program version that wrote that entry. */
  readonly program: string;
  /** Versions of the program that measured the points, sorted. */
  readonly engines: readonly string[];
  /** The ledger itself, up to and with the head: for attaching to the report. */
  readonly ledgerText: string;
}

export type DeriveSeries = (contents: RunContents, state: RunState) => Series;

/**
 * Rebuilds the facts of a run from its folder.
 *
 * @param folder the run's output folder
 * @errors record-missing, ledger-damaged, ledger-resaved, object-missing, object-damaged, record-empty
 */
export async function readRunFacts(
  folder: Path,
  port: FilePort = realFilePort,
  derive: DeriveSeries = deriveRunSeries,
): Promise<Result<RunFacts>> {
  const file = pathText(joinPath(folder, ledgerName));
  let bytes: Buffer | undefined;
  try {
    bytes = await readLedgerBytes(port, folder);
  } catch (cause) {
    return fail(outputProblem(cause, file));
  }
  if (bytes === undefined) {
    const hint = 'Give the folder of one run, which holds ledger.jsonl.';
    return fail(recordProblem('record-missing', `${pathText(folder)} holds no record`, { hint, file }));
  }
  const parsed = parseLedger(bytes, file);
  return parsed.ok ? factsOf(port, folder, parsed.value.lines, derive) : parsed;
}

/**
 * The facts that a ledger's lines and the stored objects give.
 *
 * @errors object-missing, object-damaged, record-empty (no method yet)
 */
export async function factsOf(
  port: FilePort,
  folder: Path,
  lines: readonly LedgerLine[],
  derive: DeriveSeries = deriveRunSeries,
): Promise<Result<RunFacts>> {
  const state = foldLedger(lines);
  const contents = await loadContents(port, folder, state);
  if (!contents.ok) return contents;
  if (contents.value === undefined || state.method === undefined) {
    return fail(recordProblem('record-empty', `the record of ${pathText(folder)} holds no method yet`, {}));
  }
  const methodText = await getRaw(port, folder, state.method.sha256);
  if (!methodText.ok) return methodText;
  const head = dataHeadOf(lines);
  const headEntry = lines[head.seq - 1]!.entry;
  const series = derive(contents.value, state);
  const exceptions = exceptionFacts(state, acquiredTimes(contents.value.files));
  return ok({
    run: state.run,
    method: contents.value.method,
    methodText: methodText.value.toString('utf8'),
    methodRevision: state.method.revision,
    revisions: state.revisions.map(revisionFact),
    runFile: contents.value.runFile,
    series,
    head,
    amendments: amendmentsOf(state),
    exceptions: [...exceptions, ...gapFacts(state, series)].sort((a, b) => a.seq - b.seq),
    files: fileFacts(state),
    createdUtc: headEntry.at,
    program: headEntry.program,
    engines: enginesOf(state),
    ledgerText: lines
      .slice(0, head.seq)
      .map(({ entry }) => encodeLine(entry).bytes.toString('utf8'))
      .join(''),
  });
}

function revisionFact(entry: RunState['revisions'][number]): RevisionFact {
  const { seq, at, revision, sha256, title, version, state, by, because } = entry;
  const signed = { ...(by !== undefined ? { by } : {}), ...(because !== undefined ? { because } : {}) };
  return { seq, at, revision, sha256, title, version, state, ...signed };
}

function enginesOf(state: RunState): string[] {
  const engines = [...state.files.values()].map(({ kept }) => kept.engine).filter((engine) => engine !== undefined);
  return [...new Set(engines)].sort();
}
