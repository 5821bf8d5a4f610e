import { fail, ok, type Result } from '../base/result.js';
import { joinPath, nameText, pathText } from '../record/bytePath.js';
import { readWhole, replaceFile } from '../record/durable.js';
import { outputProblem } from '../record/recordProblem.js';
import type { RunOnIndex } from '../record/renderer.js';
import { recordedRuns } from './recordedRuns.js';
import { isThere } from './renderRun.js';
import { recallRun } from './runMemory.js';
import { runKey } from './shareListing.js';
import type { WatchSession } from './watchTypes.js';

const indexName = 'index.html';

/**
 * Writes the page of all runs when a record changed and its bytes differ. Runs of earlier shares and passes stay on it: it shows the output folder.
 *
 * @errors disk-full, output-not-writable, output-failed and the renderer's own
 */
export async function renderIndexPage(session: WatchSession): Promise<Result<void>> {
  const { renderer, context, settings } = session;
  if (renderer.index === undefined) return ok(undefined);
  if (!session.isIndexStale && (await isThere(context.port, joinPath(settings.outputFolder, indexName)))) return ok(undefined);
  const runs: RunOnIndex[] = [];
  for (const names of await recordedRuns(context.port, settings.outputFolder)) {
    const folder = joinPath(settings.outputFolder, ...names);
    const memory = await recallRun(context, folder, session.runs.get(runKey(names)));
    if (!memory.ok) continue;
    session.runs.set(runKey(names), memory.value);
    runs.push({ run: memory.value.state.run || names.map(nameText).join('/'), names, folder, lines: memory.value.lines });
  }
  if (runs.length === 0) return ok(undefined);
  const page = await renderer.index(runs);
  if (!page.ok) return page;
  try {
    const present = await readWhole(context.port, joinPath(settings.outputFolder, indexName));
    if (present === undefined || !present.equals(page.value))
      await replaceFile(context.port, settings.outputFolder, indexName, page.value);
    session.isIndexStale = false;
    return ok(undefined);
  } catch (cause) {
    return fail(outputProblem(cause, pathText(joinPath(settings.outputFolder, indexName))));
  }
}
