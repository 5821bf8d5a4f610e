import type { Flag } from '../base/flag.js';
import { fail, invariant, ok, type Problem, type Result } from '../base/result.js';
import type { Method, RunFile } from '../method/method.js';
import { readMethod } from '../method/readMethod.js';
import { readRunFile } from '../method/readRunFile.js';
import type { PointRecord } from '../point/pointRecord.js';
import type { FilePort, Path } from './filePort.js';
import { getPoint, getRaw } from './objectStore.js';
import type { FileState, RunState } from './runState.js';
import { thinDrawings } from './thinDrawings.js';

/** A measured file with its records, one a spectrum block. */
export interface ContentFile {
  readonly file: string;
  readonly sha256: string;
  /** Modification time on the share when it was first taken in, ISO 8601 UTC: for files that hold no time. */
  readonly modifiedUtc?: string;
  readonly records: readonly PointRecord[];
}

/** A file that could not be used. */
export interface ContentInput {
  readonly file: string;
  readonly sha256?: string;
  readonly status: 'set-aside' | 'incomplete';
  readonly flags: readonly Flag[];
}

/** What the series is derived from: a set, without order of arrival. Sorted by name. */
export interface RunContents {
  readonly run: string;
  readonly method: Method;
  readonly runFile: RunFile;
  readonly files: readonly ContentFile[];
  readonly inputs: readonly ContentInput[];
}

/**
 * Loads what stands in the record: the captured method and run file, and every point record, each checked against its hash.
 *
 * @returns `undefined` when the run has no method yet
 * @errors object-missing, object-damaged (a damaged point is never rendered)
 */
export async function loadContents(port: FilePort, folder: Path, state: RunState): Promise<Result<RunContents | undefined>> {
  if (state.method === undefined) return ok(undefined);
  const method = await loadMethod(port, folder, state.method.sha256, state.method.file);
  if (!method.ok) return method;
  const runFile = await loadRunFile(port, folder, state);
  if (!runFile.ok) return runFile;
  const files: ContentFile[] = [];
  const inputs: ContentInput[] = [];
  const sorted = [...state.files.values()].sort((a, b) => (a.key < b.key ? -1 : 1));
  const count = sorted.reduce((sum, { kept }) => sum + (kept.points?.length ?? 0), 0);
  let index = 0;
  for (const { kept } of sorted) {
    if (kept.state === 'vanished') continue;
    if (kept.state === 'measured') {
      const file = await loadFile(port, folder, kept);
      if (!file.ok) return file;
      const first = index;
      index += file.value.records.length;
      files.push({ ...file.value, records: file.value.records.map((record, at) => thinDrawings(record, first + at, count)) });
      continue;
    }
    const hash = kept.sha256 !== undefined ? { sha256: kept.sha256 } : {};
    inputs.push({ file: kept.file, ...hash, status: kept.state, flags: kept.flags ?? [] });
  }
  return ok({ run: state.run, method: method.value, runFile: runFile.value, files, inputs });
}

async function loadFile(port: FilePort, folder: Path, kept: FileState['kept']): Promise<Result<ContentFile>> {
  const records: PointRecord[] = [];
  for (const hash of kept.points ?? []) {
    const record = await getPoint(port, folder, hash);
    if (!record.ok) return record;
    records.push(record.value);
  }
  invariant(kept.sha256 !== undefined, 'a measured input has a hash');
  const modifiedUtc = kept.modifiedNs !== undefined ? { modifiedUtc: utcOfNs(kept.modifiedNs) } : {};
  return ok({ file: kept.file, sha256: kept.sha256, ...modifiedUtc, records });
}

/** Reads a method back from its captured bytes. */
export async function loadMethod(port: FilePort, folder: Path, hash: string, file: string): Promise<Result<Method>> {
  const bytes = await getRaw(port, folder, hash);
  if (!bytes.ok) return bytes;
  const method = readMethod(bytes.value.toString('utf8'), file);
  return method.ok ? method : fail(firstOf(method.problem));
}

async function loadRunFile(port: FilePort, folder: Path, state: RunState): Promise<Result<RunFile>> {
  if (state.runFile === undefined) return ok({});
  const bytes = await getRaw(port, folder, state.runFile.sha256);
  if (!bytes.ok) return bytes;
  const runFile = readRunFile(bytes.value.toString('utf8'), state.runFile.file);
  return runFile.ok ? runFile : fail(firstOf(runFile.problem));
}

function firstOf(problems: readonly Problem[]): Problem {
  const first = problems[0];
  invariant(first !== undefined, 'a refusal names at least one problem');
  return first;
}

export function utcOfNs(nanoseconds: string): string {
  return new Date(Number(BigInt(nanoseconds) / 1_000_000n)).toISOString().replace('.000Z', 'Z');
}
