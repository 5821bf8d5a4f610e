import { pathText } from '../record/bytePath.js';
import type { Path } from '../record/filePort.js';
import type { LedgerLine } from '../record/ledgerLine.js';
import { readTold } from '../record/told.js';
import type { Series } from '../series/series.js';
import { runFolderOf } from './runFolder.js';
import type { RunListing } from './shareListing.js';
import { type RunOutcome, runNameOf } from './takeInRun.js';
import type { WatchSession } from './watchTypes.js';

const ended: ReadonlySet<string> = new Set(['target-reached', 'final']);
/** A run whose last point was acquired longer ago is over, not silent. */
const liveForMs = 24 * 3_600_000;

/** Hands on what a pass learned of a run, and whether the run has fallen silent. No record is held meanwhile. */
export async function tellNews(session: WatchSession, listing: RunListing, outcome: RunOutcome): Promise<void> {
  const { tell, context, settings } = session;
  const now = context.clock.monotonicMs();
  const lines = session.runs.get(listing.key)?.lines ?? [];
  if (outcome.taken > 0) session.takenMs.set(listing.key, now);
  else if (!session.takenMs.has(listing.key))
    session.takenMs.set(listing.key, now - sinceLastInputMs(lines, context.clock.nowMs()));
  if (tell === undefined) return;
  if (!settings.isOnce)
    for (const { code, message } of outcome.problems) await tell({ kind: 'trouble', code, message, run: outcome.run });
  const folder = runFolderOf(session, listing);
  const series = await seriesOf(session, folder, lines);
  if (series === undefined) return;
  const run = runNameOf(session, listing);
  await tell({ kind: 'series', run, folder, lines, series });
  const quietMs = now - session.takenMs.get(listing.key)!;
  if (settings.silentAfterMs === undefined || quietMs < settings.silentAfterMs || !isLive(series, context.clock.nowMs())) return;
  const sinceUtc = new Date(context.clock.nowMs() - quietMs).toISOString();
  await tell({ kind: 'silent', run, folder, lines, series, minutes: Math.floor(quietMs / 60_000), sinceUtc });
}

/** As last derived; after a start it is derived once when someone may still have to be told. */
async function seriesOf(session: WatchSession, folder: Path, lines: readonly LedgerLine[]): Promise<Series | undefined> {
  const known = session.series.get(pathText(folder));
  if (known !== undefined) return known;
  const isNeeded = lines.length > 0 && (!session.settings.isOnce || hasUndelivered(lines));
  if (!isNeeded || session.renderer.series === undefined) return undefined;
  const series = await session.renderer.series(folder, lines);
  if (!series.ok) return undefined;
  session.series.set(pathText(folder), series.value);
  return series.value;
}

function hasUndelivered(lines: readonly LedgerLine[]): boolean {
  const last = new Map(readTold(lines).map(({ key, to, state }) => [`${key} ${to}`, state]));
  return [...last.values()].includes('failed');
}

function sinceLastInputMs(lines: readonly LedgerLine[], nowMs: number): number {
  const last = lines.findLast(({ entry }) => entry.kind === 'input')?.entry.at;
  return last !== undefined ? Math.max(0, Math.min(liveForMs, nowMs - Date.parse(last))) : 0;
}

function isLive({ states, points }: Series, nowMs: number): boolean {
  const last = points.at(-1)?.acquired;
  return last !== undefined && nowMs - Date.parse(last) < liveForMs && !states.some(({ state }) => ended.has(state));
}
