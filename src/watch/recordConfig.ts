import { ok, type Result } from '../base/result.js';
import { putRaw } from '../record/objectStore.js';
import { foldLedger } from '../record/runState.js';
import type { RunWork } from './takeInRun.js';

/**
 * Puts the method and the run file into the record before the first result that rests on them. An edited method is noticed,
 * captured and shown; the run goes on with the revision it has.
 *
 * @errors those of the object store and of `append`
 */
export async function recordConfig({ session, run, held, config }: RunWork): Promise<Result<void>> {
  const { port } = session.context;
  const state = foldLedger(held.lines());
  const source = state.method === undefined ? config.method : config.edited;
  if (source !== undefined && !state.revisions.some(({ sha256 }) => sha256 === source.method.sha256)) {
    const stored = await putRaw(port, held.folder, Buffer.from(source.text));
    if (!stored.ok) return stored;
    const { title, version, sha256 } = source.method;
    const use = state.method === undefined ? 'used' : 'noticed';
    const revision = state.revisions.length + 1;
    const line = await held.append({ kind: 'method', sha256, file: source.file, title, version, revision, state: use });
    if (!line.ok) return line;
    if (use === 'noticed') {
      const message = `the method file was edited; the run goes on with revision ${state.method?.revision}. To measure every point with the new one: kinetrail amend <DIR/run> --use-method ${source.file} --by WHO --because WHY`;
      session.onEvent({ kind: 'note', run, file: source.file, message });
    }
  }
  if (config.newRunFile === undefined || state.runFile?.sha256 === config.newRunFile.sha256) return ok(undefined);
  const stored = await putRaw(port, held.folder, config.newRunFile.bytes);
  if (!stored.ok) return stored;
  const line = await held.append({ kind: 'run-file', file: config.newRunFile.file, sha256: config.newRunFile.sha256 });
  return line.ok ? ok(undefined) : line;
}
