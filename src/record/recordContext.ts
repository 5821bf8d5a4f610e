import { hostname, userInfo } from 'node:os';
import { programVersion } from '../base/version.js';
import { type Clock, realClock } from './clock.js';
import { type FilePort, type Path, realFilePort } from './filePort.js';
import type { Writer } from './ledgerEntry.js';
import type { Holder, LockOptions } from './recordLock.js';

/** Everything from outside that the record needs. */
export interface RecordContext {
  readonly port: FilePort;
  readonly clock: Clock;
  readonly writer: Writer;
  /** Tests decide who is alive; else the operating system is asked. */
  readonly isHolderAlive?: (holder: Holder) => boolean;
}

/** The real disk, clock and user. */
export function realContext(): RecordContext {
  return { port: realFilePort, clock: realClock, writer: { host: hostname(), user: userName(), program: programVersion } };
}

function userName(): string {
  try {
    return userInfo().username;
  } catch {
    // A user id without a name, as in many containers.
    return `uid ${process.getuid?.() ?? 'unknown'}`;
  }
}

/** What `takeLock` needs of a context. */
export function lockOptions({ port, clock, writer, isHolderAlive }: RecordContext, folder: Path): LockOptions {
  const nowUtc = new Date(clock.nowMs()).toISOString();
  return { port, folder, user: writer.user, nowUtc, ...(isHolderAlive !== undefined ? { isHolderAlive } : {}) };
}
