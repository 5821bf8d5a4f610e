import { ok, type Result } from '../base/result.js';
import { nameText } from '../record/bytePath.js';
import type { InputEntry } from '../record/ledgerEntry.js';
import type { StampedInput } from '../record/runState.js';
import { announceInput } from './announce.js';
import { type Batch, makeBatch } from './batch.js';
import { type Examined, examineFile, stillChanging } from './examineFile.js';
import { type ReadyFile, settleKey } from './planRun.js';
import { statText, writeStatCache } from './statCache.js';
import type { RunOutcome, RunWork } from './takeInRun.js';

/** Files that a pass takes in from one run before it turns to the next: bounds memory, and lets other runs have their turn. */
const filesAPassMax = 200;

/**
 * Takes the quiet files of a run in, in the order of their names.
 *
 * @errors those of capture and commit; what was committed before stands
 */
export async function takeFiles(work: RunWork): Promise<Result<Pick<RunOutcome, 'taken' | 'hasMore'>>> {
  const { session, run, held, plan, memory } = work;
  let taken = 0;
  const cacheSize = { changes: 0 };
  const onCommitted = (entry: InputEntry) => {
    taken += 1;
    announceInput(session, run, entry, memory.state.files.get(keyOf(entry))?.kept);
  };
  const batch = makeBatch({ session, held, method: work.config.method, onCommitted });
  for (const ready of plan.ready.slice(0, filesAPassMax)) {
    if (session.signal?.aborted) break;
    const step = await takeFile(work, ready, batch, onCommitted, cacheSize);
    if (!step.ok) return step;
  }
  for (const { file } of session.isLastPass ? plan.waiting : []) {
    const step = await appendFate(work, stillChanging(file), memory.state.files.get(file.key)?.latest, onCommitted);
    if (!step.ok) return step;
  }
  const finished = await batch.finish();
  if (!finished.ok && finished.problem.code !== 'watch-stopped') return finished;
  if (cacheSize.changes > 0) await writeStatCache(session.context.port, held.folder, memory.statCache);
  return ok({ taken, hasMore: plan.ready.length > filesAPassMax });
}

async function takeFile(
  work: RunWork,
  { spectrum, seenForMs }: ReadyFile,
  batch: Batch,
  onCommitted: (entry: InputEntry) => void,
  cacheSize: { changes: number },
): Promise<Result<void>> {
  const { session, run, listing, memory } = work;
  const key = settleKey(listing.key, spectrum.key);
  const examined = await examineFile(session, listing, spectrum, seenForMs < session.settings.longestWaitMs);
  if (examined.kind === 'waiting') {
    session.unfinished.set(key, statText(spectrum.stat));
    if (examined.isChanging) session.settling.restart(key, session.context.clock.monotonicMs());
    session.onEvent({ kind: 'waiting', run, file: nameText(spectrum.name), message: examined.why });
    return ok(undefined);
  }
  session.settling.forget(key);
  session.unfinished.delete(key);
  const before = memory.state.files.get(spectrum.key)?.latest;
  if (examined.kind === 'complete') {
    if (before === undefined || !isSameContent(before, examined, session.context.writer.program))
      return batch.take(examined.entry, examined.sha256, examined.bytes);
    memory.statCache.set(spectrum.key, { stat: statText(spectrum.stat), sha256: examined.sha256 });
    cacheSize.changes += 1;
    return ok(undefined);
  }
  const finished = await batch.finish();
  return finished.ok ? appendFate(work, examined.entry, before, onCommitted) : finished;
}

/** Records the fate of a file that cannot be measured, once. */
async function appendFate(
  { held }: RunWork,
  entry: InputEntry,
  before: StampedInput | undefined,
  onCommitted: (entry: InputEntry) => void,
): Promise<Result<void>> {
  const code = (input: InputEntry) => input.flags?.[0]?.code;
  if (before?.state === entry.state && code(before) === code(entry) && statOf(before) === statOf(entry)) return ok(undefined);
  const line = await held.append(entry);
  if (!line.ok) return line;
  onCommitted(entry);
  return ok(undefined);
}

function statOf({ sizeBytes, modifiedNs, inode }: InputEntry): string {
  return `${sizeBytes} ${modifiedNs} ${inode}`;
}

/** The same bytes under another time or inode: seen before, decided before. */
function isSameContent(before: StampedInput, { sha256 }: Extract<Examined, { kind: 'complete' }>, program: string): boolean {
  if (before.sha256 !== sha256 || before.state === 'incomplete') return false;
  const wasFault = (before.flags ?? []).some(({ code }) => code === 'program-fault' || code === 'measuring-died');
  return !wasFault || before.engine === program;
}

function keyOf({ file, fileBase64 }: InputEntry): string {
  return Buffer.from(fileBase64 ?? file, fileBase64 !== undefined ? 'base64' : 'utf8').toString('latin1');
}
