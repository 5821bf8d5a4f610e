import { fail, ok, type Problem, type Result } from '../base/result.js';
import { byteKey, joinPath, nameText } from '../record/bytePath.js';
import type { FileKind, FilePort, FileStat, Path } from '../record/filePort.js';
import { systemCode } from '../record/recordProblem.js';

/** One name in a run folder that looks like a spectrum. */
export interface SpectrumName {
  readonly name: Buffer;
  /** One character a byte. */
  readonly key: string;
  readonly stat: FileStat;
}

/** A folder that directly holds spectra. */
export interface RunListing {
  /** Names from the share down to the folder. */
  readonly names: readonly Buffer[];
  readonly key: string;
  readonly spectra: readonly SpectrumName[];
  readonly runFile?: FileStat;
}

export interface ShareListing {
  readonly device: bigint;
  readonly runs: readonly RunListing[];
  /** Folders that were listed and hold no spectrum. */
  readonly emptied: readonly RunListing[];
  /** Links and folders that were passed over. */
  readonly skipped: readonly { readonly path: string; readonly why: string }[];
  /** Folders that could not be listed: their absence proves nothing. */
  readonly failed: readonly { readonly key: string; readonly path: string; readonly problem: Problem }[];
}

export const runFileName = 'run.yaml';
const depthMax = 16;
const foldersMax = 20_000;
const statsAtOnce = 64;

/** Whether a name is one that a finished spectrum bears: temporary and hidden names are not. */
export function isSpectrumName(name: Buffer): boolean {
  const text = name.toString('latin1');
  return /\.(jdx|dx|jcamp)$/i.test(text) && !/^[.~]/.test(text);
}

/**
 * Lists a share: one listing a folder and one stat a spectrum; opens nothing and follows no link.
 *
 * @errors share-away (the share itself cannot be listed), share-not-a-folder
 */
export async function listShare(port: FilePort, share: Path): Promise<Result<ShareListing>> {
  let device: bigint;
  try {
    const root = await port.statThrough(share);
    if (root.kind !== 'folder') return fail(shareProblem('share-not-a-folder', 'the share is not a folder', undefined));
    device = root.device;
  } catch (cause) {
    return fail(awayProblem(cause));
  }
  const listing = {
    device,
    runs: [] as RunListing[],
    emptied: [] as RunListing[],
    skipped: [] as { path: string; why: string }[],
    failed: [] as ShareListing['failed'][number][],
  };
  const waiting: Buffer[][] = [[]];
  for (let count = 0; waiting.length > 0 && count < foldersMax; count += 1) {
    const names = waiting.shift()!;
    try {
      const folder = await listFolder(port, share, names);
      (folder.run.spectra.length > 0 ? listing.runs : listing.emptied).push(folder.run);
      listing.skipped.push(...folder.skipped);
      if (names.length < depthMax) waiting.push(...folder.folders.map((name) => [...names, name]));
    } catch (cause) {
      const problem = awayProblem(cause);
      if (names.length === 0) return fail(problem);
      listing.failed.push({ key: runKey(names), path: pathOf(names), problem });
    }
  }
  listing.runs.sort((a, b) => (a.key < b.key ? -1 : 1));
  return ok(listing);
}

interface FolderListing {
  readonly run: RunListing;
  readonly folders: readonly Buffer[];
  readonly skipped: readonly { readonly path: string; readonly why: string }[];
}

async function listFolder(port: FilePort, share: Path, names: readonly Buffer[]): Promise<FolderListing> {
  const folder = joinPath(share, ...names);
  const entries = await port.readFolder(folder);
  const isVisible = (name: Buffer) => name[0] !== 0x2e;
  const folders = entries.filter(({ name, kind }) => kind === 'folder' && isVisible(name)).map(({ name }) => name);
  const candidates = entries.filter(({ name, kind }) => kind !== 'folder' && isSpectrumName(name));
  const skipped = entries
    .filter(({ name, kind }) => kind === 'link' && isVisible(name) && !isSpectrumName(name))
    .map(({ name }) => ({ path: pathOf([...names, name]), why: 'a link: not followed' }));
  const spectra = await statAll(port, folder, candidates);
  const hasRunFile = entries.some(({ name }) => name.toString('latin1') === runFileName);
  const runFile = hasRunFile ? await statIfThere(port, joinPath(folder, runFileName)) : undefined;
  folders.sort(Buffer.compare);
  return { run: { names, key: runKey(names), spectra, ...(runFile ? { runFile } : {}) }, folders, skipped };
}

async function statAll(
  port: FilePort,
  folder: Path,
  entries: readonly { name: Buffer; kind: FileKind }[],
): Promise<SpectrumName[]> {
  const spectra: SpectrumName[] = [];
  for (let start = 0; start < entries.length; start += statsAtOnce) {
    const some = entries.slice(start, start + statsAtOnce);
    const stats = await Promise.all(some.map(({ name }) => statIfThere(port, joinPath(folder, name))));
    some.forEach(({ name }, index) => {
      const stat = stats[index];
      if (stat !== undefined && stat.kind !== 'folder') spectra.push({ name, key: byteKey(name), stat });
    });
  }
  return spectra.sort((a, b) => (a.key < b.key ? -1 : 1));
}

/** A name that vanished between listing and stat is not there. */
async function statIfThere(port: FilePort, path: Path): Promise<FileStat | undefined> {
  try {
    return await port.stat(path);
  } catch (cause) {
    if (systemCode(cause) === 'ENOENT') return undefined;
    throw cause;
  }
}

export function runKey(names: readonly Buffer[]): string {
  return names.map(byteKey).join('/');
}

function pathOf(names: readonly Buffer[]): string {
  return names.map(nameText).join('/');
}

function awayProblem(cause: unknown): Problem {
  const code = systemCode(cause);
  if (code === undefined) throw cause;
  return shareProblem('share-away', `the share cannot be listed (${code})`, cause);
}

export function shareProblem(code: 'share-away' | 'share-not-a-folder', message: string, cause: unknown): Problem {
  const hint = 'Nothing is concluded about its files. Check the path and that the share is connected.';
  return { code, area: 'watch', message, hint, retry: 'later', ...(cause !== undefined ? { cause } : {}) };
}
