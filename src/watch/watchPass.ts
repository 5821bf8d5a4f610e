import { fail, ok, type Problem, type Result } from '../base/result.js';
import { settleKey } from './planRun.js';
import { hasRecordedRuns } from './recordedRuns.js';
import { renderIndexPage } from './renderIndexPage.js';
import { type RunListing, type ShareListing, shareProblem } from './shareListing.js';
import { type RunOutcome, takeInRun } from './takeInRun.js';
import { tellNews } from './tellNews.js';
import type { WatchSession } from './watchTypes.js';

export interface PassOutcome {
  readonly listing: ShareListing;
  readonly runs: readonly RunOutcome[];
  readonly problems: readonly Problem[];
}

/**
 * One pass over the share: lists it, then takes each run in turn. One bad run never stops the others.
 *
 * @errors share-away, share-not-a-folder: then nothing is concluded about any file
 */
export async function watchPass(session: WatchSession): Promise<Result<PassOutcome>> {
  const listed = await session.reader.list();
  if (!listed.ok) return listed;
  const listing = listed.value;
  const away = await emptyShare(session, listing);
  if (away !== undefined) return fail(away);
  announceSkipped(session, listing);
  const problems: Problem[] = listing.failed.map(({ path, problem }) => ({ ...problem, message: `${path}: ${problem.message}` }));
  const outcomes: RunOutcome[] = [];
  for (const run of [...listing.runs, ...emptiedRuns(session, listing)]) {
    if (session.signal?.aborted) break;
    const outcome = await takeInRun(session, run);
    outcomes.push(outcome);
    if (!session.signal?.aborted) await tellNews(session, run, outcome);
    if (outcome.problems.some(({ code }) => code === 'disk-full')) break;
  }
  const indexed = session.signal?.aborted ? ok(undefined) : await renderIndexPage(session);
  if (!indexed.ok) problems.push(indexed.problem);
  return ok({ listing, runs: outcomes, problems });
}

/** A share without any run, where there were runs: a mount point without its mount, not a share whose files were deleted. */
async function emptyShare(session: WatchSession, listing: ShareListing): Promise<Problem | undefined> {
  if (listing.runs.length > 0 || listing.failed.length > 0) return undefined;
  const hadRuns = session.runs.size > 0 || (await hasRecordedRuns(session.context.port, session.settings.outputFolder));
  if (!hadRuns || listing.emptied.length > 1) return undefined;
  return shareProblem(
    'share-away',
    'the share holds no run although the record knows of some: it seems not to be connected',
    undefined,
  );
}

/** Folders that are there but hold no spectrum any more, although some were known or waited for. */
function emptiedRuns(session: WatchSession, listing: ShareListing): RunListing[] {
  const waiting = session.settling.keys();
  return listing.emptied.filter(
    ({ key }) => (session.runs.get(key)?.lines.length ?? 0) > 0 || waiting.some((name) => name.startsWith(settleKey(key, ''))),
  );
}

function announceSkipped(session: WatchSession, listing: ShareListing): void {
  for (const { path, why } of listing.skipped) {
    if (session.skippedTold.has(path)) continue;
    session.skippedTold.add(path);
    session.onEvent({ kind: 'skipped', file: path, message: `skipped: ${why}` });
  }
}
