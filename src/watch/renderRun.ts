import { fail, ok, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import { joinPath, pathText } from '../record/bytePath.js';
import { readWhole, replaceFile } from '../record/durable.js';
import type { FilePort, Path } from '../record/filePort.js';
import { dataHeadOf } from '../record/ledger.js';
import { outputProblem, systemCode } from '../record/recordProblem.js';
import type { HeldRecord } from '../record/runRecord.js';
import { foldLedger } from '../record/runState.js';
import type { RunMemory } from './runMemory.js';
import type { RenderDeps } from './watchTypes.js';

const renderEveryMs = 60_000;

/** Whether a run's derived files lag behind its record, or one of them is missing. */
export async function isRenderDue(session: RenderDeps, folder: Path, { lines, state }: RunMemory): Promise<boolean> {
  if (lines.length === 0 || state.method === undefined) return false;
  if (state.rendered?.of !== dataHeadOf(lines).seq) return true;
  for (const name of Object.keys(state.rendered.files)) {
    if (!(await isThere(session.context.port, joinPath(folder, name)))) return true;
  }
  return false;
}

/**
 * Writes the derived files of a run, each only when its bytes differ, and records their hashes. The same record gives the same
 * bytes, so doing it again changes nothing and appends nothing.
 *
 * @param hasMore more files of this run wait: then it is done at most once a minute
 * @errors disk-full, output-not-writable, output-failed, object-missing, object-damaged
 */
export async function renderRun(session: RenderDeps, held: HeldRecord, hasMore: boolean): Promise<Result<void>> {
  const now = session.context.clock.monotonicMs();
  const key = pathText(held.folder);
  const before = session.renderedMs.get(key);
  if (hasMore && before !== undefined && now - before < renderEveryMs) return ok(undefined);
  const derived = await session.renderer.derive(held.folder, held.lines());
  if (!derived.ok) return derived;
  if (derived.value === undefined) return ok(undefined);
  session.renderedMs.set(key, now);
  if (derived.value.series !== undefined) session.series.set(key, derived.value.series);
  const { port } = session.context;
  const hashes: Record<string, string> = {};
  try {
    for (const [name, bytes] of derived.value.files) {
      hashes[name] = sha256(bytes);
      const present = await readWhole(port, joinPath(held.folder, name));
      if (present === undefined || sha256(present) !== hashes[name]) await replaceFile(port, held.folder, name, bytes);
    }
  } catch (cause) {
    return fail(outputProblem(cause, key));
  }
  const of = dataHeadOf(held.lines()).seq;
  const { rendered } = foldLedger(held.lines());
  if (rendered?.of === of && isSame(rendered.files, hashes)) return ok(undefined);
  const line = await held.append({ kind: 'rendered', of, files: hashes });
  return line.ok ? ok(undefined) : line;
}

function isSame(a: Readonly<Record<string, string>>, b: Readonly<Record<string, string>>): boolean {
  const names = Object.keys(a);
  return names.length === Object.keys(b).length && names.every((name) => a[name] === b[name]);
}

/** Whether a regular file has that name. */
export async function isThere(port: FilePort, path: Path): Promise<boolean> {
  try {
    return (await port.stat(path)).kind === 'file';
  } catch (cause) {
    if (systemCode(cause) === undefined) throw cause;
    return false;
  }
}
