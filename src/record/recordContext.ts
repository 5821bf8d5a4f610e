import { hostname, userInfo } from 'node:os';
import { programVersion } from '../base/version.js';
import { type Clock, realClock } from './clock.js';
import { type FilePort, realFilePort } from './filePort.js';
import type { Writer } from './ledgerEntry.js';

/** Everything from outside that the record needs. */
export interface RecordContext {
  readonly port: FilePort;
  readonly clock: Clock;
  readonly writer: Writer;
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
