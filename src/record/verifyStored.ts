import { joinPath } from './bytePath.js';
import type { FilePort, Path } from './filePort.js';
import type { LedgerEntry } from './ledgerEntry.js';
import type { LedgerLine } from './ledgerLine.js';
import { getPoint, getRaw, pointsFolder, rawFolder } from './objectStore.js';
import { systemCode } from './recordProblem.js';
import type { Check } from './verifyTypes.js';

/** Reads every stored file that the ledger names and compares it with its name; tells of those it does not name. */
export async function verifyStored(port: FilePort, folder: Path, lines: readonly LedgerLine[]): Promise<Check[]> {
  const raw = new Map<string, number>();
  const points = new Map<string, number>();
  for (const { entry } of lines) collect(entry, raw, points);
  const failed: Check[] = [];
  for (const [hash, seq] of raw) {
    const read = await getRaw(port, folder, hash);
    if (!read.ok) failed.push(failure(seq, read.problem.message, `${rawFolder}/${hash}.gz`));
  }
  for (const [hash, seq] of points) {
    const read = await getPoint(port, folder, hash);
    if (!read.ok) failed.push(failure(seq, read.problem.message, `${pointsFolder}/${hash}.json`));
  }
  const unreferenced = [
    ...(await unnamed(port, folder, rawFolder, new Set([...raw.keys()].map((hash) => `${hash}.gz`)))),
    ...(await unnamed(port, folder, pointsFolder, new Set([...points.keys()].map((hash) => `${hash}.json`)))),
  ];
  const notes: Check[] =
    unreferenced.length > 0
      ? [
          {
            name: 'unreferenced',
            state: 'note',
            message: `${unreferenced.length} stored files are named by no entry: an interrupted capture, or a ledger put back to an older copy`,
            file: unreferenced[0]!,
          },
        ]
      : [];
  if (failed.length > 0) return [...failed, ...notes];
  const message = `${raw.size} captured files and ${points.size} point records are as they were stored`;
  return [{ name: 'stored-files', state: 'pass', message }, ...notes];
}

function collect(entry: LedgerEntry, raw: Map<string, number>, points: Map<string, number>): void {
  const note = (hashes: Map<string, number>, hash: string) => {
    if (!hashes.has(hash)) hashes.set(hash, entry.seq);
  };
  if (entry.kind === 'method' || entry.kind === 'run-file') note(raw, entry.sha256);
  // Files that were never captured (incomplete ones) carry no method.
  if (entry.kind === 'input' && entry.sha256 !== undefined && entry.methodSha256 !== undefined) note(raw, entry.sha256);
  if (entry.kind === 'input') for (const hash of entry.points ?? []) note(points, hash);
}

function failure(seq: number, message: string, file: string): Check {
  return { name: 'stored-files', state: 'fail', message: `entry ${seq}: ${message}`, seq, file };
}

async function unnamed(port: FilePort, folder: Path, store: string, named: ReadonlySet<string>): Promise<string[]> {
  try {
    const entries = await port.readFolder(joinPath(folder, store));
    return entries
      .map(({ name }) => name.toString('latin1'))
      .filter((name) => !named.has(name))
      .sort()
      .map((name) => `${store}/${name}`);
  } catch (cause) {
    if (systemCode(cause) === undefined) throw cause;
    return [];
  }
}
