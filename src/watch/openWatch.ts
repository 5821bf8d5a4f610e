import { dirname, relative, resolve, sep } from 'node:path';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import { makeFolders, removeTemporaries } from '../record/durable.js';
import type { FilePort } from '../record/filePort.js';
import type { Measurer } from '../record/measurer.js';
import { lockOptions, type RecordContext } from '../record/recordContext.js';
import { type RecordLock, takeLock } from '../record/recordLock.js';
import { outputProblem, systemCode } from '../record/recordProblem.js';
import type { Renderer } from '../record/renderer.js';
import { makeSettling } from './settling.js';
import { shareProblem } from './shareListing.js';
import type { ShareReader } from './shareReader.js';
import type { WatchEvent, WatchSession, WatchSettings } from './watchTypes.js';

export interface WatchParts {
  readonly context: RecordContext;
  readonly settings: WatchSettings & { readonly outputFolder: string };
  readonly reader: ShareReader;
  readonly measurer: Measurer;
  readonly renderer: Renderer;
  readonly onEvent: (event: WatchEvent) => void;
  readonly tell?: WatchSession['tell'];
  readonly signal?: AbortSignal;
}

export interface OpenWatch {
  readonly session: WatchSession;
  close(): Promise<void>;
}

/**
 * Begins a watch: checks that share and output folder are apart, makes the output folder and takes it.
 *
 * @errors share-away, share-not-a-folder, output-nested, record-held, disk-full, output-not-writable, output-failed
 */
export async function openWatch(parts: WatchParts): Promise<Result<OpenWatch>> {
  const { context, settings } = parts;
  const apart = await requireApart(context.port, settings.share, settings.outputFolder);
  if (!apart.ok) return apart;
  const made = await makeOutput(context.port, settings.outputFolder);
  if (!made.ok) return made;
  const lock = await takeLock(lockOptions(context, settings.outputFolder));
  if (!lock.ok) return lock;
  const opened = begin(parts, lock.value);
  try {
    await removeTemporaries(context.port, settings.outputFolder);
    return ok(opened);
  } catch (cause) {
    const problem = outputProblem(cause, settings.outputFolder);
    await opened.close();
    return fail(problem);
  }
}

function begin(parts: WatchParts, lock: RecordLock): OpenWatch {
  const { settings } = parts;
  const { tell, ...rest } = parts;
  const session: WatchSession = {
    ...rest,
    ...(tell !== undefined ? { tell } : {}),
    settling: makeSettling({ settleMs: settings.settleMs, trustsModifiedTime: settings.isOnce }),
    runs: new Map(),
    unfinished: new Map(),
    renderedMs: new Map(),
    takenMs: new Map(),
    series: new Map(),
    skippedTold: new Set(),
    isIndexStale: false,
    isLastPass: false,
  };
  const close = async () => {
    await Promise.all([parts.reader.close(), parts.measurer.close()]);
    // A lock that cannot be removed is found stale at the next start.
    await lock.release().catch((cause: unknown) => {
      if (systemCode(cause) === undefined) throw cause;
    });
  };
  return { session, close };
}

/** Neither folder may lie inside the other, also by way of links: the share is never written to. */
export async function requireApart(port: FilePort, share: string, outputFolder: string): Promise<Result<void>> {
  let realShare: string;
  try {
    const stat = await port.statThrough(share);
    if (stat.kind !== 'folder') return fail(shareProblem('share-not-a-folder', `${share} is not a folder`, undefined));
    realShare = await port.realPath(share);
  } catch (cause) {
    const code = systemCode(cause);
    if (code === undefined) throw cause;
    return fail(shareProblem('share-away', `the share ${share} is not available (${code})`, cause));
  }
  const realOutput = await realPathOfComing(port, outputFolder);
  const isNested = isInside(realOutput, realShare) || isInside(realShare, realOutput);
  return isNested ? fail(nested(share, outputFolder)) : ok(undefined);
}

function isInside(path: string, folder: string): boolean {
  const way = relative(folder, path);
  return way === '' || (way !== '..' && !way.startsWith(`..${sep}`));
}

function nested(share: string, outputFolder: string): Problem {
  const message = `the output folder ${outputFolder} and the share ${share} lie in one another`;
  const hint = 'Choose an output folder outside the share: the share is only ever read.';
  return { code: 'output-nested', area: 'usage', message, hint, retry: 'never' };
}

/** The real path of a folder that may not exist yet. */
async function realPathOfComing(port: FilePort, folder: string): Promise<string> {
  const { ancestor, missing } = await deepestExisting(port, folder);
  return resolve(ancestor, ...missing);
}

async function deepestExisting(port: FilePort, folder: string): Promise<{ ancestor: string; missing: string[] }> {
  const missing: string[] = [];
  for (let path = resolve(folder); ; path = dirname(path)) {
    try {
      return { ancestor: await port.realPath(path), missing };
    } catch (cause) {
      if (systemCode(cause) === undefined) throw cause;
      if (dirname(path) === path) return { ancestor: path, missing };
      missing.unshift(path.slice(dirname(path).length).replace(/^\//, ''));
    }
  }
}

async function makeOutput(port: FilePort, folder: string): Promise<Result<void>> {
  try {
    const { ancestor, missing } = await deepestExisting(port, folder);
    await makeFolders(port, ancestor, missing);
    await syncAncestors(port, ancestor);
    const stat = await port.statThrough(folder);
    if (stat.kind === 'folder') return ok(undefined);
    return fail({ code: 'output-not-a-folder', area: 'usage', message: `${folder} is not a folder`, retry: 'never' });
  } catch (cause) {
    return fail(outputProblem(cause, folder));
  }
}

/**
 * An earlier start may have made some of these folders and died before it synced them. Folders of other owners that cannot be
 * opened were not made by us.
 */
async function syncAncestors(port: FilePort, folder: string): Promise<void> {
  for (let path = dirname(folder); ; path = dirname(path)) {
    await port.syncFolder(path).catch((cause: unknown) => {
      if (systemCode(cause) === undefined) throw cause;
    });
    if (dirname(path) === path) return;
  }
}
