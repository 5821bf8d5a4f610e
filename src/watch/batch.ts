import { ok, type Result } from '../base/result.js';
import type { InputEntry } from '../record/ledgerEntry.js';
import type { HeldRecord } from '../record/runRecord.js';
import { foldLedger, resultKey } from '../record/runState.js';
import type { MethodSource } from './chooseMethod.js';
import type { EntryBase } from './examineFile.js';
import { adopt, appendInput, capture, commit, type Underway } from './takeInFiles.js';
import type { MeasureDeps } from './watchTypes.js';

/** Takes complete files through capture, measuring and commit; a few are under way at once, commits keep the order given. */
export interface Batch {
  take(entry: EntryBase, sha256: string, bytes: Uint8Array, isAgain?: boolean): Promise<Result<void>>;
  finish(): Promise<Result<void>>;
}

export interface BatchOptions {
  readonly session: MeasureDeps;
  readonly held: HeldRecord;
  readonly method: MethodSource;
  readonly onCommitted: (entry: InputEntry) => void;
}

export function makeBatch({ session, held, method, onCommitted }: BatchOptions): Batch {
  const underway: Underway[] = [];
  const results = new Map(foldLedger(held.lines()).results);
  const committedNow = (entry: InputEntry) => {
    const line = held.lines().at(-1)!.entry;
    if (line.kind === 'input') results.set(resultKey(entry.sha256 ?? '', method.method.sha256), line);
    onCommitted(entry);
  };
  const commitOldest = async (): Promise<Result<void>> => {
    const oldest = underway.shift();
    if (oldest === undefined) return ok(undefined);
    const committed = await commit(session, held, oldest, method);
    if (!committed.ok) return committed;
    committedNow(committed.value);
    return ok(undefined);
  };
  const finish = async (): Promise<Result<void>> => {
    while (underway.length > 0) {
      const committed = await commitOldest();
      if (!committed.ok) return committed;
    }
    return ok(undefined);
  };
  const take: Batch['take'] = async (entry, sha256, bytes, isAgain = false) => {
    if (underway.some((other) => other.sha256 === sha256)) {
      const finished = await finish();
      if (!finished.ok) return finished;
    }
    const adopted = adopt(results, entry, sha256, method, session.context.writer.program);
    if (adopted !== undefined && !isAgain) {
      const finished = await finish();
      if (!finished.ok) return finished;
      const appended = await appendInput(held, adopted);
      if (appended.ok) onCommitted(appended.value);
      return appended.ok ? ok(undefined) : appended;
    }
    const captured = await capture(session, held, entry, bytes, method, isAgain);
    if (!captured.ok) return captured;
    underway.push(captured.value);
    return underway.length > session.measurer.atOnce ? commitOldest() : ok(undefined);
  };
  return { take, finish };
}
