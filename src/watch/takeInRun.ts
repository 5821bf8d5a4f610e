import { basename } from 'node:path';
import { ok, type Problem, type Result } from '../base/result.js';
import { nameText } from '../record/bytePath.js';
import { type HeldRecord, holdRecord } from '../record/runRecord.js';
import { measureAgain } from './measureAgain.js';
import { noteAbsences } from './noteAbsences.js';
import { planRun, type RunPlan } from './planRun.js';
import { type RunConfig, readConfig } from './readConfig.js';
import { recordConfig } from './recordConfig.js';
import { isRenderDue, renderRun } from './renderRun.js';
import { runFolderOf } from './runFolder.js';
import { type RunMemory, recallRun, reflect } from './runMemory.js';
import type { RunListing } from './shareListing.js';
import { takeFiles } from './takeFiles.js';
import type { WatchSession } from './watchTypes.js';

/** What a pass did in one run. */
export interface RunOutcome {
  readonly run: string;
  readonly taken: number;
  /** Quiet time still needed by the file that needs most; absent when nothing waits. */
  readonly waitMs?: number;
  readonly hasMore: boolean;
  readonly problems: readonly Problem[];
}

/** One run in one pass, with its record held. */
export interface RunWork {
  readonly session: WatchSession;
  readonly run: string;
  readonly listing: RunListing;
  readonly held: HeldRecord;
  readonly config: RunConfig;
  readonly plan: RunPlan;
  readonly memory: RunMemory;
}

export function runNameOf(session: WatchSession, listing: RunListing): string {
  return listing.names.length === 0 ? basename(session.settings.share) : listing.names.map(nameText).join('/');
}

/**
 * One pass over one run: compares, captures, measures, commits, renders. A pass that finds nothing new opens no spectrum and
 * writes nothing.
 */
export async function takeInRun(session: WatchSession, listing: RunListing): Promise<RunOutcome> {
  const { context, settings } = session;
  const run = runNameOf(session, listing);
  const folder = runFolderOf(session, listing);
  const done = (problems: readonly Problem[], more: Partial<RunOutcome> = {}): RunOutcome => ({
    run,
    taken: 0,
    hasMore: false,
    problems,
    ...more,
  });
  const recalled = await recallRun(context, folder, session.runs.get(listing.key));
  if (!recalled.ok) return done([recalled.problem]);
  const memory = recalled.value;
  session.runs.set(listing.key, memory);
  const config = await readConfig(session, listing, run, memory, folder);
  if (!config.ok) return done(config.problem);
  const plan = planRun(session, listing, memory);
  const longest = plan.waiting.reduce((most, { waitMs }) => Math.max(most, waitMs), 0);
  const wait = plan.waiting.length > 0 ? { waitMs: longest } : {};
  const { warnings } = config.value;
  const mustWork = (session.isLastPass && plan.waiting.length > 0) || hasWork(config.value, plan, memory);
  if (!mustWork && !(await isRenderDue(session, folder, memory))) return done(warnings, wait);
  const held = await holdRecord({ context, outputFolder: settings.outputFolder, names: listing.names, run });
  if (!held.ok) return done([...warnings, held.problem], wait);
  session.isIndexStale = true;
  try {
    const worked = await work({ session, run, listing, held: held.value, config: config.value, plan, memory });
    return worked.ok ? done(warnings, { ...wait, ...worked.value }) : done([...warnings, worked.problem], wait);
  } finally {
    await held.value.release();
  }
}

function hasWork(config: RunConfig, plan: RunPlan, { state, hasTornTail }: RunMemory): boolean {
  const isNoticed = config.edited === undefined || state.revisions.some(({ sha256 }) => sha256 === config.edited?.method.sha256);
  const isStale = [...state.files.values()].some(
    ({ kept }) => kept.methodSha256 !== undefined && kept.methodSha256 !== config.method.method.sha256,
  );
  const hasFiles = plan.ready.length + plan.vanished.length + plan.gone.length > 0;
  return hasFiles || config.newRunFile !== undefined || !isNoticed || hasTornTail || isStale;
}

async function work(work: RunWork): Promise<Result<Pick<RunOutcome, 'taken' | 'hasMore'>>> {
  const { session, listing, held, memory } = work;
  const remember = async () => {
    session.runs.set(listing.key, await reflect(session.context, held.folder, held.lines(), memory.statCache));
  };
  const configured = await recordConfig(work);
  if (!configured.ok) return configured;
  const files = await takeFiles(work);
  if (!files.ok) return files;
  const noted = await noteAbsences(work);
  if (!noted.ok) return noted;
  await remember();
  if (session.signal?.aborted) return ok(files.value);
  const again = await measureAgain(session, work.run, held, work.config.method);
  if (!again.ok) return again;
  const rendered = await renderRun(session, held, files.value.hasMore);
  await remember();
  return rendered.ok ? ok(files.value) : rendered;
}
