import { fail, ok, type Problem, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import type { RunFile } from '../method/method.js';
import { readRunFile } from '../method/readRunFile.js';
import { joinPath, pathText } from '../record/bytePath.js';
import type { Path } from '../record/filePort.js';
import { getRaw } from '../record/objectStore.js';
import { loadMethod } from '../record/runContents.js';
import { chooseMethod, type MethodSource } from './chooseMethod.js';
import type { RunMemory } from './runMemory.js';
import { type RunListing, runFileName } from './shareListing.js';
import type { WatchSession } from './watchTypes.js';

/** What governs a run in this pass. */
export interface RunConfig {
  /** The method to measure with: the captured one once the run has begun. */
  readonly method: MethodSource;
  /** The file's present method, when it is not the captured one. */
  readonly edited?: MethodSource;
  /** A run file that is new or changed. */
  readonly newRunFile?: { readonly bytes: Uint8Array; readonly sha256: string; readonly file: string };
  /** Faults that do not stop the run, because the record holds an earlier, valid version. */
  readonly warnings: readonly Problem[];
}

/**
 * Reads the run file and the method of a run. An invalid file never displaces a valid one that the record holds.
 *
 * @errors every fault of the files when the run cannot begin without them
 */
export async function readConfig(
  session: WatchSession,
  listing: RunListing,
  run: string,
  memory: RunMemory,
  folder: Path,
): Promise<Result<RunConfig, readonly Problem[]>> {
  const warnings: Problem[] = [];
  const runFile = await readNewRunFile(session, listing, memory);
  const hasBegun = memory.state.method !== undefined;
  if (!runFile.ok) {
    if (!hasBegun) return runFile;
    warnings.push(...runFile.problem);
  }
  const chosen = await chooseMethod(session, listing, run, runFile.ok ? runFile.value.facts : {});
  const newRunFile = runFile.ok && runFile.value.fresh ? { newRunFile: runFile.value.fresh } : {};
  if (!hasBegun) return chosen.ok ? ok({ method: chosen.value, ...newRunFile, warnings }) : chosen;
  const captured = await loadCaptured(session, folder, memory);
  if (!captured.ok) return fail([captured.problem]);
  // A run that has begun needs no method file any more.
  if (!chosen.ok) {
    if (chosen.problem[0]?.code !== 'method-none') warnings.push(...chosen.problem);
    return ok({ method: captured.value, ...newRunFile, warnings });
  }
  const isEdited = chosen.value.method.sha256 !== captured.value.method.sha256;
  return ok({ method: captured.value, ...(isEdited ? { edited: chosen.value } : {}), ...newRunFile, warnings });
}

interface NewRunFile {
  readonly facts: RunFile;
  readonly fresh?: NonNullable<RunConfig['newRunFile']>;
}

async function readNewRunFile(
  session: WatchSession,
  listing: RunListing,
  memory: RunMemory,
): Promise<Result<NewRunFile, readonly Problem[]>> {
  if (listing.runFile === undefined) return ok({ facts: {} });
  const path = pathText(joinPath(session.settings.share, ...listing.names, runFileName));
  const read = await session.reader.read([...listing.names, Buffer.from(runFileName)]);
  if (!read.ok) return fail([{ ...read.problem, code: 'run-file-unreadable', where: { file: path } }]);
  const { bytes } = read.value;
  const facts = readRunFile(Buffer.from(bytes).toString('utf8'), path);
  if (!facts.ok) return facts;
  const hash = sha256(bytes);
  const isRecorded = memory.state.runFile?.sha256 === hash;
  return ok({ facts: facts.value, ...(isRecorded ? {} : { fresh: { bytes, sha256: hash, file: runFileName } }) });
}

async function loadCaptured(session: WatchSession, folder: Path, { state }: RunMemory): Promise<Result<MethodSource>> {
  const { sha256: hash, file } = state.method!;
  const bytes = await getRaw(session.context.port, folder, hash);
  if (!bytes.ok) return bytes;
  const method = await loadMethod(session.context.port, folder, hash, file);
  return method.ok ? ok({ method: method.value, text: bytes.value.toString('utf8'), file }) : method;
}
