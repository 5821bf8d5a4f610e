import { type ChildProcess, fork } from 'node:child_process';

/** A child process that answers one request after the other and can be killed when it does not. */
export interface Killable {
  /** Resolves with the answer, or with why there is none: the process is then gone, and the next request starts another. */
  ask(request: unknown, timeoutMs: number): Promise<{ answer: unknown } | { died: string }>;
  close(): Promise<void>;
}

export interface KillableOptions {
  /** Module to run, by URL; it answers every message with one message. */
  readonly module: URL;
  readonly args?: readonly string[];
  readonly heapMegabytes?: number;
}

/**
 * Starts a child process on the first request. Threads would share the few file threads and the heap limits of their process:
 * four hung reads would stop the record as well.
 */
export function makeKillable(options: KillableOptions): Killable {
  let child: ChildProcess | undefined;
  let last: Promise<unknown> = Promise.resolve();
  const start = (): ChildProcess => {
    const execArgv = [...process.execArgv.filter((word) => !word.startsWith('--inspect'))];
    if (options.heapMegabytes !== undefined) execArgv.push(`--max-old-space-size=${options.heapMegabytes}`);
    const started = fork(options.module, options.args ?? [], {
      serialization: 'advanced',
      execArgv,
      stdio: ['ignore', 'ignore', 'pipe', 'ipc'],
      // A signal to the terminal's group stops the watcher, which then ends its children in order.
      detached: true,
    });
    // Whoever waits for an answer is told by its own listener; an idle process that fails is started again.
    started.on('error', () => undefined);
    started.unref();
    (started.stderr as unknown as { unref?: () => void } | null)?.unref?.();
    started.channel?.unref();
    return started;
  };
  const askOne = (request: unknown, timeoutMs: number) => {
    child ??= start();
    const current = child;
    return converse(current, request, timeoutMs).then((outcome) => {
      if ('died' in outcome && child === current) child = undefined;
      return outcome;
    });
  };
  return {
    ask: (request, timeoutMs) => {
      const next = last.then(() => askOne(request, timeoutMs));
      last = next.catch(() => undefined);
      return next;
    },
    close: async () => {
      const current = child;
      child = undefined;
      if (current === undefined || current.exitCode !== null || current.signalCode !== null) return;
      current.kill('SIGKILL');
    },
  };
}

function converse(child: ChildProcess, request: unknown, timeoutMs: number): Promise<{ answer: unknown } | { died: string }> {
  return new Promise((resolve) => {
    let lastWords = '';
    const onWords = (words: Buffer) => {
      lastWords = `${lastWords}${words.toString('utf8')}`.slice(-2000);
    };
    const finish = (outcome: { answer: unknown } | { died: string }) => {
      clearTimeout(timer);
      child.channel?.unref();
      child.stderr?.off('data', onWords);
      child.off('message', onMessage);
      child.off('exit', onExit);
      child.off('error', onError);
      resolve(outcome);
    };
    const onMessage = (answer: unknown) => finish({ answer });
    const onExit = (code: number | null, signal: string | null) => {
      const reason = /heap|memory/i.test(lastWords) ? 'out of memory' : (signal ?? `exit ${code}`);
      finish({ died: `its process ended (${reason})` });
    };
    const onError = (cause: Error) => finish({ died: `its process failed (${cause.message})` });
    const timer = setTimeout(() => {
      child.kill('SIGKILL');
      finish({ died: `no answer within ${Math.round(timeoutMs / 1000)} s` });
    }, timeoutMs);
    child.stderr?.on('data', onWords);
    child.on('message', onMessage);
    child.on('exit', onExit);
    child.on('error', onError);
    child.channel?.ref();
    if (!child.connected) return finish({ died: 'its process had ended' });
    child.send(request as object, (cause) => {
      if (cause) finish({ died: `its process could not be asked (${cause.message})` });
    });
  });
}
