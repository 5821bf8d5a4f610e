import type { Message, Target } from './message.js';

/** What was sent before, and where what is sent now is written down. */
export interface Outbox {
  /** Every `key` and target that the record says was delivered or has failed before. */
  readonly told: readonly { readonly key: string; readonly to: string; readonly state: 'delivered' | 'failed' }[];
  record(entry: { event: string; to: string; state: 'delivered' | 'failed'; key: string; message?: string }): Promise<void>;
}

/** Waiting times between attempts, kept in memory: after a restart the first pass tries again at once. */
export interface Patience {
  readonly nextMs: Map<string, number>;
  readonly failures: Map<string, number>;
}

const attemptMs = 6000;
const firstWaitMs = 20_000;
const longestWaitMs = 3_600_000;

/**
 * Delivers messages, each once to each target that asks for its event. What fails is tried again with a growing wait; the first
 * failure and the delivery stand in the record. Delivery is at least once: after a crash between sending and recording, the same
 * key is sent again.
 *
 * @param nowMs a monotonic clock
 * @returns how many were delivered and how many wait
 */
export async function deliver(
  messages: readonly Message[],
  targets: readonly Target[],
  outbox: Outbox,
  patience: Patience,
  nowMs: () => number,
): Promise<{ delivered: number; waiting: number }> {
  const done = new Set(outbox.told.filter(({ state }) => state === 'delivered').map(({ key, to }) => `${key} ${to}`));
  const failed = new Set(outbox.told.filter(({ state }) => state === 'failed').map(({ key, to }) => `${key} ${to}`));
  const due = messages.flatMap((message) =>
    targets
      .filter(({ on, name }) => on.includes(message.event) && !done.has(`${message.key} ${name}`))
      .map((target) => ({ message, target })),
  );
  let [delivered, waiting] = [0, 0];
  for (const { message, target } of due) {
    const id = `${message.key} ${target.name}`;
    if ((patience.nextMs.get(id) ?? 0) > nowMs()) {
      waiting += 1;
      continue;
    }
    const reason = await attempt(target, message);
    const entry = { event: message.event, to: target.name, key: message.key };
    if (reason === undefined) {
      await outbox.record({ ...entry, state: 'delivered' });
      delivered += 1;
      continue;
    }
    waiting += 1;
    const failures = (patience.failures.get(id) ?? 0) + 1;
    patience.failures.set(id, failures);
    patience.nextMs.set(id, nowMs() + Math.min(longestWaitMs, firstWaitMs * 2 ** (failures - 1)));
    if (!failed.has(id) && failures === 1) await outbox.record({ ...entry, state: 'failed', message: reason });
  }
  return { delivered, waiting };
}

/** One try, bounded in time: a hanging server cannot hold up the watch. */
async function attempt(target: Target, message: Message): Promise<string | undefined> {
  const stop = new AbortController();
  let timer: NodeJS.Timeout | undefined;
  const late = new Promise<string>((resolve) => {
    timer = setTimeout(() => {
      stop.abort();
      resolve(`no answer within ${attemptMs / 1000} s`);
    }, attemptMs);
  });
  const sending = target.send(message, stop.signal).catch((cause: unknown) => describe(cause));
  try {
    return await Promise.race([sending, late]);
  } finally {
    clearTimeout(timer);
  }
}

function describe(cause: unknown): string {
  if (!(cause instanceof Error)) return String(cause);
  const inner = cause.cause instanceof Error ? `: ${cause.cause.message}` : '';
  return `${cause.message}${inner}`.slice(0, 300);
}
