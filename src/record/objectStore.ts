import { gunzipSync, gzipSync } from 'node:zlib';
import { canonicalJson } from '../base/canonicalJson.js';
import { limits } from '../base/limits.js';
import { fail, ok, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import type { PointRecord } from '../point/pointRecord.js';
import { joinPath, pathText } from './bytePath.js';
import { publishNew, readWhole } from './durable.js';
import type { FilePort, Path } from './filePort.js';
import { outputProblem, recordProblem } from './recordProblem.js';

export const rawFolder = 'raw';
export const pointsFolder = 'points';
const operatingSystemByte = 9;

/**
 * Stores captured bytes under their SHA-256, compressed. The header of the compressed form holds no time and no system, so
 * that the same bytes give the same file. What is there already is compared, not written.
 *
 * @returns the hash
 * @errors disk-full, output-not-writable, output-failed, object-damaged
 */
export async function putRaw(port: FilePort, runFolder: Path, bytes: Uint8Array): Promise<Result<string>> {
  const hash = sha256(bytes);
  const packed = gzipSync(bytes, { level: 6 });
  packed[operatingSystemByte] = 255;
  const stored = await put(port, joinPath(runFolder, rawFolder), `${hash}.gz`, packed);
  if (!stored.ok) return stored;
  if (stored.value) return ok(hash);
  const found = await getRaw(port, runFolder, hash);
  return found.ok ? ok(hash) : found;
}

/** Reads captured bytes back and checks them against their name. */
export async function getRaw(port: FilePort, runFolder: Path, hash: string): Promise<Result<Buffer>> {
  const path = joinPath(runFolder, rawFolder, `${hash}.gz`);
  const packed = await get(port, path);
  if (!packed.ok) return packed;
  let bytes: Buffer;
  try {
    bytes = gunzipSync(packed.value, { maxOutputLength: limits.fileSizeBytesMax + 1 });
  } catch (cause) {
    return fail(damaged(path, cause));
  }
  return sha256(bytes) === hash ? ok(bytes) : fail(damaged(path));
}

/**
 * Stores a point record under the SHA-256 of its canonical JSON.
 *
 * @returns the hash
 * @errors disk-full, output-not-writable, output-failed, object-damaged
 */
export async function putPoint(port: FilePort, runFolder: Path, record: PointRecord): Promise<Result<string>> {
  const text = canonicalJson(record);
  const hash = sha256(text);
  const stored = await put(port, joinPath(runFolder, pointsFolder), `${hash}.json`, Buffer.from(text));
  if (!stored.ok) return stored;
  if (stored.value) return ok(hash);
  const found = await getPoint(port, runFolder, hash);
  return found.ok ? ok(hash) : found;
}

/** Reads a point record back and checks it against its name. */
export async function getPoint(port: FilePort, runFolder: Path, hash: string): Promise<Result<PointRecord>> {
  const path = joinPath(runFolder, pointsFolder, `${hash}.json`);
  const bytes = await get(port, path);
  if (!bytes.ok) return bytes;
  if (sha256(bytes.value) !== hash) return fail(damaged(path));
  return ok(JSON.parse(bytes.value.toString('utf8')) as PointRecord);
}

async function put(port: FilePort, folder: Path, name: string, bytes: Uint8Array): Promise<Result<boolean>> {
  try {
    return ok(await publishNew(port, folder, name, bytes));
  } catch (cause) {
    return fail(outputProblem(cause, pathText(joinPath(folder, name))));
  }
}

async function get(port: FilePort, path: Path): Promise<Result<Buffer>> {
  const file = pathText(path);
  try {
    const bytes = await readWhole(port, path);
    if (bytes !== undefined) return ok(bytes);
    const hint = 'Restore the run folder from a copy.';
    return fail(recordProblem('object-missing', `a stored file is missing: ${file}`, { hint, file }));
  } catch (cause) {
    return fail(outputProblem(cause, file));
  }
}

function damaged(path: Path, cause?: unknown) {
  const file = pathText(path);
  const hint = 'Restore this file from a copy of the run folder.';
  return recordProblem('object-damaged', `a stored file does not fit its name: ${file}`, { hint, file, cause });
}
