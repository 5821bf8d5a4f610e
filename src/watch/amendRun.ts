import { fail, ok, type Problem, type Result } from '../base/result.js';
import { readMethod } from '../method/readMethod.js';
import { pathText } from '../record/bytePath.js';
import type { Path } from '../record/filePort.js';
import type { AmendmentEntry } from '../record/ledgerEntry.js';
import { getRaw, putRaw } from '../record/objectStore.js';
import { recordProblem, systemCode } from '../record/recordProblem.js';
import { loadMethod } from '../record/runContents.js';
import { type HeldRecord, holdRecord, readLedgerBytes } from '../record/runRecord.js';
import { foldLedger } from '../record/runState.js';
import { findPoint } from './findPoint.js';
import { measureAgain } from './measureAgain.js';
import { renderRun } from './renderRun.js';
import type { MeasureDeps, RenderDeps, WatchSession } from './watchTypes.js';

export interface AmendRequest {
  readonly action: AmendmentEntry['action'];
  /** File name or beginning of its SHA-256, with `#2` for a block. */
  readonly point?: string;
  readonly by: string;
  readonly because: string;
  /** For `use-method`: the new method. */
  readonly method?: { readonly text: string; readonly file: string };
}

export type AmendDeps = MeasureDeps & RenderDeps & Pick<WatchSession, 'onEvent'>;

const waitForRecordMs = 30_000;
const lookEveryMs = 500;

/**
 * Adds a signed-off change to a run's record, measures again when that was asked for, and brings the derived files up to date.
 * Nothing is erased: what stood before is in the ledger.
 *
 * @param folder the run's output folder
 * @errors amend-unsigned, point-unknown, point-ambiguous, method errors, record-missing, record-held, those of the record
 */
export async function amendRun(deps: AmendDeps, folder: Path, request: AmendRequest): Promise<Result<{ readonly seq: number }>> {
  if (request.by.trim() === '' || request.because.trim() === '') {
    return fail(
      usage('amend-unsigned', 'an amendment needs --by WHO and --because WHY', 'Both stand in the record and on the report.'),
    );
  }
  const adoptsObjects = request.action === 'adopt-objects';
  const present = await requireLedger(deps, folder);
  if (!present.ok && !adoptsObjects) return present;
  if (present.ok && adoptsObjects) return fail(usage('amend-useless', 'the record has its ledger; there is nothing to adopt'));
  const held = await holdPatiently(deps, folder, adoptsObjects);
  if (!held.ok) return held;
  try {
    return await amendHeld(deps, held.value, request);
  } finally {
    await held.value.release();
  }
}

/** A watcher holds a record only while it writes: waiting a little is enough. */
async function holdPatiently(
  deps: RenderDeps & { readonly signal?: AbortSignal },
  folder: Path,
  adoptsObjects: boolean,
): Promise<Result<HeldRecord>> {
  const { context } = deps;
  const until = context.clock.monotonicMs() + waitForRecordMs;
  const run = pathText(folder).split('/').at(-1) ?? '';
  while (true) {
    const held = await holdRecord({ context, outputFolder: folder, names: [], run, adoptsObjects });
    if (held.ok || held.problem.code !== 'record-held' || context.clock.monotonicMs() >= until) return held;
    await context.clock.sleep(lookEveryMs, deps.signal);
  }
}

async function amendHeld(deps: AmendDeps, held: HeldRecord, request: AmendRequest): Promise<Result<{ readonly seq: number }>> {
  const state = foldLedger(held.lines());
  const target = request.point !== undefined ? findPoint(state, request.point) : ok({});
  if (!target.ok) return target;
  const { action, by, because } = request;
  if (action === 'use-method') {
    const used = await useMethod(deps, held, request);
    if (!used.ok) return used;
  }
  const line = await held.append({ kind: 'amendment', action, ...target.value, by: by.trim(), because: because.trim() });
  if (!line.ok) return line;
  const again = await measureAsked(deps, held);
  if (!again.ok) return again;
  const rendered = await renderRun(deps, held, false);
  return rendered.ok ? ok({ seq: line.value.entry.seq }) : rendered;
}

async function useMethod({ context }: AmendDeps, held: HeldRecord, { method, by, because }: AmendRequest): Promise<Result<void>> {
  if (method === undefined) return fail(usage('amend-method', 'the new method is missing'));
  const read = readMethod(method.text, method.file);
  if (!read.ok) return fail(read.problem[0]!);
  const stored = await putRaw(context.port, held.folder, Buffer.from(method.text));
  if (!stored.ok) return stored;
  const { title, version, sha256 } = read.value;
  const known = foldLedger(held.lines()).revisions;
  const revision = known.find((other) => other.sha256 === sha256)?.revision ?? known.length + 1;
  const line = await held.append({
    kind: 'method',
    sha256,
    file: method.file,
    title,
    version,
    revision,
    state: 'used',
    by,
    because,
  });
  return line.ok ? ok(undefined) : line;
}

async function measureAsked(deps: AmendDeps, held: HeldRecord): Promise<Result<void>> {
  const state = foldLedger(held.lines());
  if (state.method === undefined) return ok(undefined);
  const { sha256, file } = state.method;
  const text = await getRaw(deps.context.port, held.folder, sha256);
  if (!text.ok) return text;
  const method = await loadMethod(deps.context.port, held.folder, sha256, file);
  if (!method.ok) return method;
  return measureAgain(deps, state.run, held, { method: method.value, text: text.value.toString('utf8'), file });
}

function usage(code: string, message: string, hint?: string): Problem {
  return { code, area: 'usage', message, retry: 'never', ...(hint !== undefined ? { hint } : {}) };
}

/**
 * Renders the derived files of a run again from its record alone; with nothing new the bytes are the same and nothing is appended.
 *
 * @errors record-missing, record-held, those of the record and of rendering
 */
export async function renderAgain(deps: RenderDeps, folder: Path): Promise<Result<void>> {
  const present = await requireLedger(deps, folder);
  if (!present.ok) return present;
  const held = await holdPatiently(deps, folder, false);
  if (!held.ok) return held;
  try {
    return await renderRun(deps, held.value, false);
  } finally {
    await held.value.release();
  }
}

async function requireLedger({ context }: RenderDeps, folder: Path): Promise<Result<void>> {
  try {
    if ((await readLedgerBytes(context.port, folder)) !== undefined) return ok(undefined);
  } catch (cause) {
    if (systemCode(cause) === undefined) throw cause;
  }
  const hint = 'Give the folder of one run, which holds ledger.jsonl.';
  return fail(recordProblem('record-missing', `${pathText(folder)} holds no record that can be read`, { hint }));
}
