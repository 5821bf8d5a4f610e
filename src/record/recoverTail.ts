import { sha256 } from '../base/sha256.js';
import { makeFolders, publishNew } from './durable.js';
import type { FilePort, OpenFile, Path } from './filePort.js';
import type { ExceptionEntry } from './ledgerEntry.js';

export const tornFolder = 'torn';

/**
 * Copies the unterminated tail of a ledger aside and cuts it off: it was never acknowledged.
 *
 * @param torn        the bytes after the last complete line
 * @param soundBytes  size to cut back to
 * @returns what the record says about it
 * @errors throws the operating system's failure; then nothing was cut
 */
export async function recoverTail(
  port: FilePort,
  folder: Path,
  open: OpenFile,
  torn: Buffer,
  soundBytes: number,
): Promise<Pick<ExceptionEntry, 'message' | 'sha256'>> {
  const hash = sha256(torn);
  const aside = await makeFolders(port, folder, [tornFolder]);
  await publishNew(port, aside, `${hash}.bin`, torn);
  // The sync of the note that follows covers the cut: until then the tail may come back, and is found again.
  await open.truncate(soundBytes);
  const message = `an unfinished last line of ${torn.length} bytes, never acknowledged, was moved to ${tornFolder}/${hash}.bin`;
  return { message, sha256: hash };
}
