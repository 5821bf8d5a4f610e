import { readFileSync, readlinkSync } from 'node:fs';
import { hostname } from 'node:os';

/** What tells one process from every other, also after its id was given to another. */
export interface ProcessFacts {
  readonly pid: number;
  readonly host: string;
  /** Start time in clock ticks since the machine started; absent where the system does not tell. */
  readonly startTicks?: string;
  readonly bootId?: string;
  /** Process ids mean something only inside their name space (containers). */
  readonly pidSpace?: string;
}

/** Facts of this process. */
export function describeProcess(): ProcessFacts {
  const startTicks = startTicksOf(process.pid);
  const bootId = readText('/proc/sys/kernel/random/boot_id');
  const pidSpace = readPidSpace();
  return {
    pid: process.pid,
    host: hostname(),
    ...(startTicks !== undefined ? { startTicks } : {}),
    ...(bootId !== undefined ? { bootId } : {}),
    ...(pidSpace !== undefined ? { pidSpace } : {}),
  };
}

/**
 * Whether a process may still be there. Only certainty says no: another machine, or another name space of process ids, is
 * beyond judgement and counts as alive.
 *
 * @source proc(5): field 22 of /proc/<pid>/stat is the start time
 */
export function isAlive(holder: ProcessFacts, self: ProcessFacts = describeProcess()): boolean {
  if (holder.host !== self.host) return true;
  if (holder.bootId !== undefined && self.bootId !== undefined && holder.bootId !== self.bootId) return false;
  if (holder.pidSpace !== self.pidSpace) return true;
  if (!hasProcess(holder.pid) || isZombie(holder.pid)) return false;
  const startTicks = startTicksOf(holder.pid);
  return holder.startTicks === undefined || startTicks === undefined || startTicks === holder.startTicks;
}

/** Whether a process id is in use. */
export function hasProcess(pid: number): boolean {
  if (!Number.isInteger(pid) || pid <= 0) return false;
  try {
    process.kill(pid, 0);
    return true;
  } catch (cause) {
    return (cause as NodeJS.ErrnoException).code === 'EPERM';
  }
}

/** Ended, but not yet collected by its parent: it holds nothing any more. */
function isZombie(pid: number): boolean {
  return ['Z', 'X'].includes(statusFields(pid)?.[0] ?? '');
}

function startTicksOf(pid: number): string | undefined {
  return statusFields(pid)?.[19];
}

/** Fields 3 and up of /proc/<pid>/stat: the command name before them may hold blanks and parentheses. */
function statusFields(pid: number): string[] | undefined {
  const text = readText(`/proc/${pid}/stat`);
  return text?.slice(text.lastIndexOf(')') + 2).split(' ');
}

function readPidSpace(): string | undefined {
  try {
    return readlinkSync('/proc/self/ns/pid');
  } catch {
    return undefined;
  }
}

function readText(path: string): string | undefined {
  try {
    return readFileSync(path, 'utf8').trim();
  } catch {
    return undefined;
  }
}
