import { joinPath } from '../record/bytePath.js';
import { readWhole, replaceFile } from '../record/durable.js';
import type { FilePort, FileStat, Path } from '../record/filePort.js';
import { systemCode } from '../record/recordProblem.js';

/** Size, time and inode under which a known content was seen again, by the bytes of the name: saves reading it once more. */
export type StatCache = Map<string, { readonly stat: string; readonly sha256: string }>;

const cacheName = '.seen.json';

/** One text for what a stat says of a file's content. */
export function statText({ sizeBytes, modifiedNs, inode }: Pick<FileStat, 'sizeBytes' | 'modifiedNs' | 'inode'>): string {
  return `${sizeBytes} ${modifiedNs} ${inode}`;
}

/** No part of the record: when it is missing or unreadable, files are read again, nothing else. */
export async function readStatCache(port: FilePort, folder: Path): Promise<StatCache> {
  const cache: StatCache = new Map();
  const bytes = await readWhole(port, joinPath(folder, cacheName)).catch((cause: unknown) => {
    if (systemCode(cause) === undefined) throw cause;
    return undefined;
  });
  if (bytes === undefined) return cache;
  try {
    const rows = JSON.parse(bytes.toString('utf8')) as [string, string, string][];
    for (const [key, stat, sha256] of rows) cache.set(key, { stat, sha256 });
  } catch {
    cache.clear();
  }
  return cache;
}

export async function writeStatCache(port: FilePort, folder: Path, cache: StatCache): Promise<void> {
  const rows = [...cache].map(([key, { stat, sha256 }]) => [key, stat, sha256]);
  // Not being able to save work later is no reason to stop now.
  await replaceFile(port, folder, cacheName, Buffer.from(JSON.stringify(rows))).catch((cause: unknown) => {
    if (systemCode(cause) === undefined) throw cause;
  });
}
