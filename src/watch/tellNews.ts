import { pathText } from '../record/bytePath.js';
import type { Series } from '../series/series.js';
import { runFolderOf } from './runFolder.js';
import type { RunListing } from './shareListing.js';
import { type RunOutcome, runNameOf } from './takeInRun.js';
import type { WatchSession } from './watchTypes.js';

const ended: ReadonlySet<string> = new Set(['target-reached', 'final']);

/** Hands on what a pass learned of a run, and whether the run has fallen silent. No record is held meanwhile. */
export async function tellNews(session: WatchSession, listing: RunListing, outcome: RunOutcome): Promise<void> {
  const { tell, context, settings } = session;
  const now = context.clock.monotonicMs();
  if (outcome.taken > 0 || !session.takenMs.has(listing.key)) session.takenMs.set(listing.key, now);
  if (tell === undefined) return;
  for (const { code, message } of outcome.problems) await tell({ kind: 'trouble', code, message, run: outcome.run });
  const folder = runFolderOf(session, listing);
  const series = session.series.get(pathText(folder));
  const lines = session.runs.get(listing.key)?.lines ?? [];
  if (series === undefined) return;
  const run = runNameOf(session, listing);
  await tell({ kind: 'series', run, folder, lines, series });
  const quietMs = now - session.takenMs.get(listing.key)!;
  if (settings.silentAfterMs === undefined || quietMs < settings.silentAfterMs || hasEnded(series)) return;
  const sinceUtc = new Date(context.clock.nowMs() - quietMs).toISOString();
  await tell({ kind: 'silent', run, folder, lines, series, minutes: Math.floor(quietMs / 60_000), sinceUtc });
}

function hasEnded({ states }: Series): boolean {
  return states.some(({ state }) => ended.has(state));
}
