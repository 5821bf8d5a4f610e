import type { FileStat } from '../record/filePort.js';

/** How long a file has been quiet, by the local monotonic clock. */
interface Waiting {
  readonly stat: FileStat;
  readonly quietSinceMs: number;
  readonly firstSeenMs: number;
}

export interface SettleTimes {
  readonly settleMs: number;
  /** A single pass takes a file whose modification time already lies that far back without waiting. */
  readonly trustsModifiedTime: boolean;
}

export type Settled =
  | { readonly isQuiet: true; readonly seenForMs: number }
  | { readonly isQuiet: false; readonly waitMs: number };

/** Follows the files that are not yet taken in, from pass to pass. */
export interface Settling {
  /** Notes what a pass saw; tells whether the file may be read. */
  observe(key: string, stat: FileStat, nowMs: number, monotonicMs: number): Settled;
  /** Forgets a file: it was taken in, or is gone. */
  forget(key: string): void;
  /** Starts the quiet time again: the file changed while it was read. */
  restart(key: string, monotonicMs: number): void;
  keys(): readonly string[];
}

export function makeSettling(times: SettleTimes): Settling {
  const waiting = new Map<string, Waiting>();
  return {
    observe: (key, stat, nowMs, monotonicMs) => {
      const before = waiting.get(key);
      const isUnchanged = before !== undefined && isSameStat(before.stat, stat);
      const now: Waiting = {
        stat,
        quietSinceMs: isUnchanged ? before.quietSinceMs : monotonicMs,
        firstSeenMs: before?.firstSeenMs ?? monotonicMs,
      };
      waiting.set(key, now);
      const quietMs = monotonicMs - now.quietSinceMs;
      const isOld =
        times.trustsModifiedTime && before === undefined && nowMs - Number(stat.modifiedNs / 1_000_000n) >= times.settleMs;
      if (isOld || quietMs >= times.settleMs) return { isQuiet: true, seenForMs: monotonicMs - now.firstSeenMs };
      return { isQuiet: false, waitMs: times.settleMs - quietMs };
    },
    forget: (key) => void waiting.delete(key),
    restart: (key, monotonicMs) => {
      const before = waiting.get(key);
      if (before !== undefined) waiting.set(key, { ...before, quietSinceMs: monotonicMs });
    },
    keys: () => [...waiting.keys()],
  };
}

export function isSameStat(a: FileStat, b: FileStat): boolean {
  return a.sizeBytes === b.sizeBytes && a.modifiedNs === b.modifiedNs && a.inode === b.inode && a.kind === b.kind;
}
