import { randomUUID } from 'node:crypto';
import { joinPath, pathText } from './bytePath.js';
import type { FilePort, OpenFile, Path } from './filePort.js';
import { hasProcess } from './processFacts.js';
import { systemCode } from './recordProblem.js';

const temporaryPrefix = '.new-';
const readPieceBytes = 1024 * 1024;

/** Writes every byte: a write may take fewer than asked, and some file systems say so only by the count. */
export async function writeAll(file: OpenFile, bytes: Uint8Array): Promise<void> {
  let written = 0;
  while (written < bytes.byteLength) {
    const count = await file.write(bytes.subarray(written));
    if (count <= 0) throw Object.assign(new Error('a write took no bytes'), { code: 'EIO' });
    written += count;
  }
}

/**
 * Publishes a new, immutable file: temporary name, every byte, size check, sync, second name, sync of the folder. A reader
 * never sees a part of it, and what is published survives a power cut.
 *
 * @returns `false` when the name was already taken (the caller compares what is there)
 * @errors throws the operating system's failure; nothing is left under the final name
 */
export async function publishNew(port: FilePort, folder: Path, name: Path, bytes: Uint8Array): Promise<boolean> {
  return withTemporary(port, folder, bytes, async (temporary) => {
    try {
      await port.link(temporary, joinPath(folder, name));
    } catch (cause) {
      if (systemCode(cause) !== 'EEXIST') throw cause;
      await port.unlink(temporary);
      // Whoever gave the name may have died before this: what is adopted must last as well.
      await port.syncFolder(folder);
      return false;
    }
    await port.unlink(temporary);
    await port.syncFolder(folder);
    return true;
  });
}

/** Replaces a file whose replacement is meant (a derived file): the old or the new bytes are there, never a mixture. */
export async function replaceFile(port: FilePort, folder: Path, name: Path, bytes: Uint8Array): Promise<void> {
  await withTemporary(port, folder, bytes, async (temporary) => {
    await port.rename(temporary, joinPath(folder, name));
    await port.syncFolder(folder);
  });
}

async function withTemporary<T>(
  port: FilePort,
  folder: Path,
  bytes: Uint8Array,
  publish: (path: Path) => Promise<T>,
): Promise<T> {
  const temporary = joinPath(folder, `${temporaryPrefix}${process.pid}-${randomUUID()}`);
  try {
    await writeTemporary(port, temporary, bytes);
    return await publish(temporary);
  } catch (cause) {
    // The first failure is the one to report; a temporary name that stays is removed at the next start.
    await port.unlink(temporary).catch(() => undefined);
    throw cause;
  }
}

async function writeTemporary(port: FilePort, path: Path, bytes: Uint8Array): Promise<void> {
  const file = await port.open(path, 'create');
  try {
    await writeAll(file, bytes);
    const { sizeBytes } = await file.stat();
    if (sizeBytes !== bytes.byteLength) {
      throw Object.assign(new Error(`${pathText(path)}: ${sizeBytes} of ${bytes.byteLength} bytes arrived`), { code: 'EIO' });
    }
    await file.sync();
  } finally {
    await file.close();
  }
}

/** Reads a regular file whole. `undefined` when it does not exist. */
export async function readWhole(port: FilePort, path: Path): Promise<Buffer | undefined> {
  let file: OpenFile;
  try {
    file = await port.open(path, 'read');
  } catch (cause) {
    if (systemCode(cause) === 'ENOENT') return undefined;
    throw cause;
  }
  try {
    return await readOpen(file, (await file.stat()).sizeBytes);
  } finally {
    await file.close();
  }
}

/** Reads an open file to its end, however its size changes meanwhile; stops beyond `sizeBytesMax`. */
export async function readOpen(file: OpenFile, expectedBytes: number, sizeBytesMax = Number.POSITIVE_INFINITY): Promise<Buffer> {
  const pieces: Buffer[] = [];
  let position = 0;
  while (position <= sizeBytesMax) {
    const piece = Buffer.allocUnsafe(Math.max(1, Math.min(readPieceBytes, expectedBytes - position + 1)));
    const count = await file.read(piece, position);
    if (count === 0) break;
    pieces.push(piece.subarray(0, count));
    position += count;
  }
  return pieces.length === 1 ? pieces[0]! : Buffer.concat(pieces);
}

/** Makes a folder and its parents, each synced into its own parent. */
export async function makeFolders(port: FilePort, base: Path, names: readonly Path[]): Promise<Path> {
  let folder = base;
  for (const name of names) {
    const parent = folder;
    folder = joinPath(folder, name);
    try {
      await port.makeFolder(folder);
    } catch (cause) {
      if (systemCode(cause) !== 'EEXIST') throw cause;
    }
    // Also when it was there: the process that made it may have died before this.
    await port.syncFolder(parent);
  }
  return folder;
}

/**
 * Removes what interrupted publications left; call only while the folder is held. Another live process may be asking for the
 * folder at this moment: its temporary name stays.
 */
export async function removeTemporaries(port: FilePort, folder: Path): Promise<void> {
  for (const { name } of await port.readFolder(folder)) {
    const text = name.toString('latin1');
    if (!text.startsWith(temporaryPrefix)) continue;
    const pid = Number.parseInt(text.slice(temporaryPrefix.length), 10);
    if (pid === process.pid || !hasProcess(pid)) await port.unlink(joinPath(folder, name));
  }
}
