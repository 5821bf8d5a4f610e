import { joinPath } from '../record/bytePath.js';
import type { FilePort, Path } from '../record/filePort.js';
import { ledgerName } from '../record/ledger.js';
import { pointsFolder, rawFolder } from '../record/objectStore.js';
import { systemCode } from '../record/recordProblem.js';
import { tornFolder } from '../record/recoverTail.js';

const storeFolders = new Set([rawFolder, pointsFolder, tornFolder]);
const depthMax = 16;

/** The folders under an output folder that hold a ledger, as names from there down, sorted. */
export async function recordedRuns(port: FilePort, outputFolder: Path): Promise<Buffer[][]> {
  const found: Buffer[][] = [];
  const waiting: Buffer[][] = [[]];
  while (waiting.length > 0) {
    const names = waiting.shift()!;
    const entries = await listOrNothing(port, joinPath(outputFolder, ...names));
    const isRun = entries.some(({ name, kind }) => kind === 'file' && name.toString('latin1') === ledgerName);
    if (isRun) found.push(names);
    if (names.length >= depthMax) continue;
    for (const { name, kind } of entries) {
      if (kind === 'folder' && !(isRun && storeFolders.has(name.toString('latin1')))) waiting.push([...names, name]);
    }
  }
  return found.sort((a, b) => Buffer.compare(Buffer.concat(a), Buffer.concat(b)));
}

export async function hasRecordedRuns(port: FilePort, outputFolder: Path): Promise<boolean> {
  return (await recordedRuns(port, outputFolder)).length > 0;
}

async function listOrNothing(port: FilePort, folder: Path) {
  try {
    return await port.readFolder(folder);
  } catch (cause) {
    if (systemCode(cause) === undefined) throw cause;
    return [];
  }
}
