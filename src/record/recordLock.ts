import { randomUUID } from 'node:crypto';
import { fail, ok, type Result } from '../base/result.js';
import { joinPath, pathText } from './bytePath.js';
import { publishNew, readWhole, replaceFile } from './durable.js';
import type { FilePort, Path } from './filePort.js';
import { describeProcess, isAlive, type ProcessFacts } from './processFacts.js';
import { outputProblem, recordProblem } from './recordProblem.js';

/** Who holds a folder. */
export interface Holder extends ProcessFacts {
  readonly token: string;
  readonly user: string;
  /** UTC. */
  readonly since: string;
}

export interface RecordLock {
  /** Set when the lock was left behind by a process that is gone. */
  readonly takenOverFrom?: Holder;
  release(): Promise<void>;
}

export interface LockOptions {
  readonly port: FilePort;
  readonly folder: Path;
  readonly user: string;
  readonly nowUtc: string;
  /** Tests give their own process facts. */
  readonly self?: ProcessFacts;
  readonly isHolderAlive?: (holder: Holder) => boolean;
}

export const lockName = '.held-by';
const takeoverDepthMax = 8;
const attemptsMax = 5;

/**
 * Takes a folder for this process. A lock of a process that is certainly gone (same machine; its id is unused, or now belongs
 * to a process that started later, or the machine was restarted) is taken over; any other is respected.
 *
 * The right to take over is itself a lock, named by the token of the stale one, so that two cannot both succeed.
 *
 * @errors record-held (holder, machine and since when), disk-full, output-not-writable, output-failed
 */
export async function takeLock(options: LockOptions): Promise<Result<RecordLock>> {
  const self: Holder = {
    ...(options.self ?? describeProcess()),
    token: randomUUID(),
    user: options.user,
    since: options.nowUtc,
  };
  try {
    return await take(options, self, lockName, 0);
  } catch (cause) {
    const problem = outputProblem(cause, pathText(joinPath(options.folder, lockName)));
    // The name may have been given before the failure: a lock of our own must not shut us out.
    await release(options.port, options.folder, lockName, self.token).catch(() => undefined);
    return fail(problem);
  }
}

async function take(options: LockOptions, self: Holder, name: string, depth: number): Promise<Result<RecordLock>> {
  const { port, folder } = options;
  const bytes = Buffer.from(`${JSON.stringify(self)}\n`);
  const mine = (takenOverFrom?: Holder): RecordLock => ({
    ...(takenOverFrom ? { takenOverFrom } : {}),
    release: () => release(port, folder, name, self.token),
  });
  for (let attempt = 0; attempt < attemptsMax; attempt += 1) {
    if (await publishNew(port, folder, name, bytes)) return ok(mine());
    const holder = await readHolder(port, folder, name);
    if (holder === undefined) continue;
    const isStale = holder !== 'unreadable' && !(options.isHolderAlive ?? isAlive)(holder);
    if (!isStale || depth >= takeoverDepthMax) return fail(held(folder, name, holder));
    const right = await take(options, self, `${lockName}-${holder.token}`, depth + 1);
    if (!right.ok) return right;
    const now = await readHolder(port, folder, name);
    const isUnchanged = now !== undefined && now !== 'unreadable' && now.token === holder.token;
    if (isUnchanged) await replaceFile(port, folder, name, bytes);
    await right.value.release();
    if (isUnchanged) return ok(mine(holder));
  }
  return fail(recordProblem('record-held', 'the folder is changing hands; try again', { retry: 'now' }));
}

async function release(port: FilePort, folder: Path, name: string, token: string): Promise<void> {
  const holder = await readHolder(port, folder, name);
  if (holder !== undefined && holder !== 'unreadable' && holder.token === token) await port.unlink(joinPath(folder, name));
}

/** Who holds a folder now; `undefined` when nobody does. */
export async function readHolder(port: FilePort, folder: Path, name = lockName): Promise<Holder | 'unreadable' | undefined> {
  const bytes = await readWhole(port, joinPath(folder, name));
  if (bytes === undefined) return undefined;
  try {
    const holder = JSON.parse(bytes.toString('utf8')) as Holder;
    return typeof holder.pid === 'number' && typeof holder.token === 'string' ? holder : 'unreadable';
  } catch {
    return 'unreadable';
  }
}

function held(folder: Path, name: string, holder: Holder | 'unreadable') {
  const file = pathText(joinPath(folder, name));
  if (holder === 'unreadable') {
    const hint = 'When no kinetrail works on this folder, remove that file.';
    return recordProblem('record-held', `${pathText(folder)} is held, and its lock ${file} cannot be read`, { hint, file });
  }
  const who = `process ${holder.pid} of ${holder.user} on ${holder.host} since ${holder.since}`;
  const hint = `Stop that process, or choose another output folder. When that machine is gone for good, remove ${file}.`;
  return recordProblem('record-held', `${pathText(folder)} is held by ${who}`, { hint, file, retry: 'later' });
}
