import type { MeasureOutcome, Measurer } from '../record/measurer.js';
import { type Killable, makeKillable } from './killableProcess.js';

export interface PoolOptions {
  readonly workers: number;
  /** Longest time that one file may take. */
  readonly timeoutMs: number;
  readonly heapMegabytes?: number;
  /** Tests give another worker. */
  readonly module?: URL;
}

const workerModule = new URL('./measureWorker.js', import.meta.url);

/** A pool of processes that measure; a file that exhausts the memory or never ends takes only its own process with it. */
export function makeMeasurePool(options: PoolOptions): Measurer {
  const { workers, timeoutMs, heapMegabytes } = options;
  const module = options.module ?? workerModule;
  const free: Killable[] = Array.from({ length: workers }, () =>
    makeKillable({ module, ...(heapMegabytes !== undefined ? { heapMegabytes } : {}) }),
  );
  const all = [...free];
  const waiting: ((worker: Killable) => void)[] = [];
  const take = (): Promise<Killable> => {
    const worker = free.pop();
    return worker ? Promise.resolve(worker) : new Promise((resolve) => waiting.push(resolve));
  };
  const giveBack = (worker: Killable) => {
    const next = waiting.shift();
    if (next) next(worker);
    else free.push(worker);
  };
  return {
    atOnce: workers,
    measure: async (task) => {
      const worker = await take();
      try {
        const outcome = await worker.ask(task, timeoutMs);
        return 'died' in outcome ? { kind: 'died', message: outcome.died } : (outcome.answer as MeasureOutcome);
      } finally {
        giveBack(worker);
      }
    },
    close: async () => {
      await Promise.all(all.map((worker) => worker.close()));
    },
  };
}
