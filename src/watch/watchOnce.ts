import { ok, type Problem, type Result } from '../base/result.js';
import { nameText } from '../record/bytePath.js';
import { dataHeadOf, type Head } from '../record/ledger.js';
import type { RunListing } from './shareListing.js';
import { runNameOf } from './takeInRun.js';
import { type PassOutcome, watchPass } from './watchPass.js';
import type { WatchSession } from './watchTypes.js';

/** A file that is on the share and is no time point. */
export interface UnreadFile {
  readonly file: string;
  readonly status: 'set-aside' | 'incomplete';
  readonly code: string;
  readonly message: string;
}

export interface RunSummary {
  readonly run: string;
  readonly names: readonly Buffer[];
  readonly pointFiles: number;
  readonly taken: number;
  readonly unread: readonly UnreadFile[];
  readonly head?: Head;
}

export interface OnceSummary {
  readonly runs: readonly RunSummary[];
  readonly problems: readonly Problem[];
}

/** Times that a single pass waits for files to come to rest. */
const waitsMax = 2;

/**
 * Makes a single pass: takes everything that is at rest, waits for the rest to come to rest, sets down as incomplete what does
 * not.
 *
 * @errors share-away, share-not-a-folder
 */
export async function watchOnce(session: WatchSession): Promise<Result<OnceSummary>> {
  const taken = new Map<string, number>();
  for (let waits = 0; ; ) {
    const pass = await watchPass(session);
    if (!pass.ok) return pass;
    for (const outcome of pass.value.runs) taken.set(outcome.run, (taken.get(outcome.run) ?? 0) + outcome.taken);
    const isStopped = session.signal?.aborted === true || hasFatal(pass.value);
    const hasMore = pass.value.runs.some((outcome) => outcome.hasMore);
    const waitMs = Math.max(0, ...pass.value.runs.map((outcome) => outcome.waitMs ?? 0));
    if (isStopped || session.isLastPass || (!hasMore && waitMs === 0)) return ok(summarise(session, pass.value, taken));
    if (hasMore) continue;
    await session.context.clock.sleep(waitMs + 1, session.signal);
    waits += 1;
    session.isLastPass = waits > waitsMax;
  }
}

function hasFatal({ runs }: PassOutcome): boolean {
  return runs.some(({ problems }) => problems.some(({ code }) => code === 'disk-full'));
}

function summarise(session: WatchSession, pass: PassOutcome, taken: ReadonlyMap<string, number>): OnceSummary {
  const runs = pass.listing.runs.map((listing) => summariseRun(session, listing, taken));
  return { runs, problems: [...pass.problems, ...pass.runs.flatMap(({ problems }) => problems)] };
}

/** Where a run stands after a pass, by what the record holds. */
export function summariseRun(session: WatchSession, listing: RunListing, taken: ReadonlyMap<string, number>): RunSummary {
  const run = runNameOf(session, listing);
  const memory = session.runs.get(listing.key);
  const head = memory !== undefined && memory.lines.length > 0 ? { head: dataHeadOf(memory.lines) } : {};
  const unread = listing.spectra.flatMap(({ key, name }): UnreadFile[] => {
    const latest = memory?.state.files.get(key)?.latest;
    if (latest === undefined || (latest.state !== 'set-aside' && latest.state !== 'incomplete')) return [];
    const flag = latest.flags?.[0];
    return [{ file: nameText(name), status: latest.state, code: flag?.code ?? latest.state, message: flag?.message ?? '' }];
  });
  const pointFiles = [...(memory?.state.files.values() ?? [])].filter(({ kept }) => kept.state === 'measured').length;
  return { run, names: listing.names, pointFiles, taken: taken.get(run) ?? 0, unread, ...head };
}
