/** Time comes in as an argument; nothing below the commands reads a clock. */
export interface Clock {
  /** Milliseconds since 1970 by the wall clock: for records, never for measuring a wait. */
  nowMs(): number;
  /** Local time minus UTC, minutes. */
  utcOffsetMin(): number;
  /** Milliseconds that only ever grow: for waiting. */
  monotonicMs(): number;
  /** Resolves after the time or as soon as the signal is given. */
  sleep(milliseconds: number, signal?: AbortSignal): Promise<void>;
}

export const realClock: Clock = {
  nowMs: () => Date.now(),
  utcOffsetMin: () => -new Date().getTimezoneOffset(),
  monotonicMs: () => performance.now(),
  sleep: (milliseconds, signal) =>
    new Promise((resolve) => {
      if (signal?.aborted) return resolve();
      const finish = () => {
        clearTimeout(timer);
        signal?.removeEventListener('abort', finish);
        resolve();
      };
      const timer = setTimeout(finish, milliseconds);
      signal?.addEventListener('abort', finish);
    }),
};
