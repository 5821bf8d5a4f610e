import { limits } from '../base/limits.js';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import { joinPath } from '../record/bytePath.js';
import { readOpen } from '../record/durable.js';
import type { FilePort, FileStat, OpenFile, Path } from '../record/filePort.js';
import { systemCode } from '../record/recordProblem.js';
import { listShare, type ShareListing } from './shareListing.js';

/** Bytes that did not change while they were read twice. */
export interface StableRead {
  readonly bytes: Uint8Array;
  readonly stat: FileStat;
}

/** The only way to the share. It reads; it can do nothing else. */
export interface ShareReader {
  list(): Promise<Result<ShareListing>>;
  /** Reads a file of the share twice; `names` lead from the share to the file. */
  read(names: readonly Buffer[]): Promise<Result<StableRead>>;
  /** Reads a file by its path: a method named by a run file. */
  readPath(path: string): Promise<Result<StableRead>>;
  close(): Promise<void>;
}

/** A reader in this process: for tests, and inside the reading process that can be killed. */
export function makeShareReader(port: FilePort, share: Path): ShareReader {
  return {
    list: () => listShare(port, share),
    read: (names) => readStable(port, joinPath(share, ...names)),
    readPath: (path) => readStable(port, path),
    close: async () => undefined,
  };
}

/**
 * Reads a regular file twice and compares: size, time and hash.
 *
 * @errors file-kind, file-too-large, file-changing (try later), file-vanished, unreadable (try later)
 */
async function readStable(port: FilePort, path: Path): Promise<Result<StableRead>> {
  let file: OpenFile | undefined;
  try {
    file = await port.open(path, 'read');
    const before = await file.stat();
    if (before.kind !== 'file') return fail(readProblem('file-kind', 'not a regular file', 'never'));
    if (before.sizeBytes > limits.fileSizeBytesMax)
      return fail(
        readProblem('file-too-large', `${before.sizeBytes} bytes; at most ${limits.fileSizeBytesMax} are read`, 'never'),
      );
    const bytes = await readOpen(file, before.sizeBytes, limits.fileSizeBytesMax);
    const again = await readOpen(file, before.sizeBytes, limits.fileSizeBytesMax);
    const after = await file.stat();
    const isSame = after.sizeBytes === bytes.length && before.modifiedNs === after.modifiedNs && sha256(bytes) === sha256(again);
    if (!isSame) return fail(readProblem('file-changing', 'it changed while it was read', 'later'));
    return ok({ bytes, stat: after });
  } catch (cause) {
    return fail(openProblem(cause));
  } finally {
    await file?.close().catch(() => undefined);
  }
}

function openProblem(cause: unknown): Problem {
  const code = systemCode(cause);
  if (code === undefined) throw cause;
  if (code === 'ENOENT') return readProblem('file-vanished', 'it is no longer there', 'never');
  if (code === 'ELOOP') return readProblem('file-kind', 'a link: not followed', 'never');
  if (code === 'ENXIO' || code === 'ENODEV') return readProblem('file-kind', 'not a regular file', 'never');
  return readProblem('unreadable', `it cannot be read (${code})`, 'later', 'Check the permissions of the file and its folder.');
}

export type ReadCode = 'file-kind' | 'file-too-large' | 'file-changing' | 'file-vanished' | 'unreadable';

export function readProblem(code: ReadCode, message: string, retry: Problem['retry'], hint?: string): Problem {
  return { code, area: 'watch', message, retry, ...(hint !== undefined ? { hint } : {}) };
}
