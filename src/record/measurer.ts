import type { Problem, Result } from '../base/result.js';
import type { PointRecord } from '../point/pointRecord.js';

/** What became of measuring one file. `died`: its process ended or did not answer; the file is the suspect. */
export type MeasureOutcome =
  | { readonly kind: 'measured'; readonly records: readonly PointRecord[] }
  | { readonly kind: 'refused'; readonly problem: Problem }
  | { readonly kind: 'fault'; readonly message: string }
  | { readonly kind: 'died'; readonly message: string };

export interface MeasureTask {
  readonly bytes: Uint8Array;
  readonly fileName: string;
  readonly methodText: string;
  readonly methodFile: string;
}

/** Measures files, several at a time, where a bad one cannot hurt the rest. */
export interface Measurer {
  readonly atOnce: number;
  measure(task: MeasureTask): Promise<MeasureOutcome>;
  close(): Promise<void>;
}

/** A measurer in this process: for tests and for `verify`. */
export function makeMeasurer(
  processFile: (task: MeasureTask) => Result<readonly PointRecord[]> | Promise<Result<readonly PointRecord[]>>,
  atOnce = 2,
): Measurer {
  return {
    atOnce,
    measure: async (task) => {
      try {
        const result = await processFile(task);
        return result.ok ? { kind: 'measured', records: result.value } : { kind: 'refused', problem: result.problem };
      } catch (fault) {
        return { kind: 'fault', message: fault instanceof Error ? `${fault.name}: ${fault.message}` : String(fault) };
      }
    },
    close: async () => undefined,
  };
}
