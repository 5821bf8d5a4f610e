import { ok, type Result } from '../base/result.js';
import { getRaw } from '../record/objectStore.js';
import type { HeldRecord } from '../record/runRecord.js';
import { foldLedger, type RunState, type StampedInput } from '../record/runState.js';
import { makeBatch } from './batch.js';
import type { MethodSource } from './chooseMethod.js';
import type { EntryBase } from './examineFile.js';
import type { MeasureDeps, WatchSession } from './watchTypes.js';

/**
 * Measures captured files again when a person asked for it: after `--use-method`, or after `--measure-again`. Nothing is ever
 * measured again for any other reason.
 *
 * @errors those of the object store and of `append`
 */
export async function measureAgain(
  session: MeasureDeps & Pick<WatchSession, 'onEvent'>,
  run: string,
  held: HeldRecord,
  method: MethodSource,
): Promise<Result<void>> {
  const state = foldLedger(held.lines());
  const due = dueAgain(state);
  if (due.length === 0) return ok(undefined);
  session.onEvent({ kind: 'note', run, message: `${due.length} captured files are measured again, as asked for` });
  const batch = makeBatch({ session, held, method, onCommitted: () => undefined });
  for (const input of due) {
    if (session.signal?.aborted) break;
    const bytes = await getRaw(session.context.port, held.folder, input.sha256!);
    if (!bytes.ok) return bytes;
    const step = await batch.take(baseOf(input), input.sha256!, bytes.value, true);
    if (!step.ok) return step;
  }
  const finished = await batch.finish();
  return finished.ok || finished.problem.code === 'watch-stopped' ? ok(undefined) : finished;
}

/** Contents whose result is older than what was asked for. */
export function dueAgain(state: RunState): StampedInput[] {
  const asked = state.amendments.findLast(({ action }) => action === 'measure-again')?.seq ?? 0;
  const contents = [...state.files.values()].flatMap(({ kept, others }) => [kept, ...others]);
  return contents.filter(
    ({ sha256, methodSha256, seq }) =>
      sha256 !== undefined && methodSha256 !== undefined && (methodSha256 !== state.method?.sha256 || seq < asked),
  );
}

function baseOf({ file, fileBase64, sha256, sizeBytes, modifiedNs, inode }: StampedInput): EntryBase {
  return {
    kind: 'input',
    file,
    ...(fileBase64 !== undefined ? { fileBase64 } : {}),
    ...(sha256 !== undefined ? { sha256 } : {}),
    ...(sizeBytes !== undefined ? { sizeBytes } : {}),
    ...(modifiedNs !== undefined ? { modifiedNs } : {}),
    ...(inode !== undefined ? { inode } : {}),
  };
}
