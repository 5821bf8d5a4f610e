import { exitCodes } from './exitCodes.js';

export interface Stop {
  readonly signal: AbortSignal;
  /** 130 or 143 once a signal came. */
  exitCode(): number | undefined;
  dispose(): void;
}

/** The first SIGINT or SIGTERM asks to finish; the second ends at once. Both leave the record whole. */
export function stopOnSignals(): Stop {
  const controller = new AbortController();
  let code: number | undefined;
  const onSignal = (signal: NodeJS.Signals) => {
    const own = signal === 'SIGINT' ? exitCodes.interrupted : exitCodes.terminated;
    if (code !== undefined) process.exit(own);
    code = own;
    process.stderr.write('\nstopping after the current step; again to stop at once\n');
    controller.abort();
  };
  const signals: NodeJS.Signals[] = ['SIGINT', 'SIGTERM'];
  for (const signal of signals) process.on(signal, onSignal);
  // A file-size limit must come back as a failed write, not end the process.
  process.on('SIGXFSZ', () => undefined);
  return {
    signal: controller.signal,
    exitCode: () => code,
    dispose: () => {
      for (const signal of signals) process.off(signal, onSignal);
    },
  };
}
