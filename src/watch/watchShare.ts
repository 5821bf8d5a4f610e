import type { Problem } from '../base/result.js';
import { holdRecord } from '../record/runRecord.js';
import { readSpace } from './diskSpace.js';
import { runNameOf } from './takeInRun.js';
import { type PassOutcome, watchPass } from './watchPass.js';
import type { WatchSession } from './watchTypes.js';

const backOffMaxMs = 300_000;
const jumpLeastMs = 120_000;

/** What lasts from pass to pass in a continuous watch. */
interface Turn {
  awaySinceMs?: number;
  awaySinceUtc?: string;
  failures: number;
  wallMs: number;
  monotonicMs: number;
  readonly lastProblems: Map<string, string>;
}

export interface WatchHooks {
  /** After each pass that saw the share. */
  readonly onPass?: (pass: PassOutcome) => Promise<void>;
}

/**
 * Watches until the signal is given. Polling only: a listing and a stat a pass. When the share is away nothing is concluded; it
 * is asked again, less and less often, and its return is recorded.
 */
export async function watchShare(session: WatchSession, hooks: WatchHooks = {}): Promise<void> {
  const { clock } = session.context;
  const turn: Turn = { failures: 0, wallMs: clock.nowMs(), monotonicMs: clock.monotonicMs(), lastProblems: new Map() };
  while (!session.signal?.aborted) {
    const space = await readSpace(session.context.port, session.settings.outputFolder);
    if (space.ok && space.value.stop !== undefined) {
      tellProblem(session, turn, 'space', space.value.stop);
      await session.tell?.({ kind: 'trouble', code: 'disk-full', message: space.value.stop.message });
      await clock.sleep(session.settings.pollMs, session.signal);
      continue;
    }
    turn.lastProblems.delete('space');
    const jumpS = clockJump(session, turn);
    const pass = await watchPass(session);
    if (!pass.ok) await onAway(session, turn, pass.problem);
    else {
      await onPresent(session, turn, pass.value, jumpS);
      await hooks.onPass?.(pass.value);
      if (!pass.value.runs.some(({ hasMore }) => hasMore)) await clock.sleep(nextLook(session, pass.value), session.signal);
    }
  }
}

/** As often as configured; sooner when a file will have come to rest before. */
function nextLook({ settings }: WatchSession, pass: PassOutcome): number {
  const waits = pass.runs.map(({ waitMs }) => waitMs ?? settings.pollMs);
  return Math.max(50, Math.min(settings.pollMs, ...waits.map((wait) => wait + 1)));
}

async function onAway(session: WatchSession, turn: Turn, problem: Problem): Promise<void> {
  const { clock } = session.context;
  if (turn.awaySinceMs === undefined) {
    turn.awaySinceMs = clock.monotonicMs();
    turn.awaySinceUtc = new Date(clock.nowMs()).toISOString();
    session.onEvent({ kind: 'share-away', message: problem.message, problem });
  }
  turn.failures += 1;
  await session.tell?.({ kind: 'trouble', code: problem.code, message: problem.message });
  const backOffMs = Math.min(backOffMaxMs, session.settings.pollMs * 2 ** Math.min(turn.failures - 1, 10));
  await clock.sleep(backOffMs, session.signal);
}

async function onPresent(session: WatchSession, turn: Turn, pass: PassOutcome, jumpS: number | undefined): Promise<void> {
  const { clock } = session.context;
  turn.failures = 0;
  if (turn.awaySinceMs !== undefined) {
    const seconds = Math.round((clock.monotonicMs() - turn.awaySinceMs) / 1000);
    const sinceUtc = turn.awaySinceUtc!;
    delete turn.awaySinceMs;
    session.onEvent({ kind: 'share-back', message: `the share is back after ${seconds} s` });
    await noteInRuns(session, pass, 'outage', `the share was not available for ${seconds} s`, { seconds, sinceUtc });
  }
  if (jumpS !== undefined) {
    const message = `the clock of this computer jumped by ${jumpS} s`;
    session.onEvent({ kind: 'note', message });
    await noteInRuns(session, pass, 'clock-jump', message, { seconds: jumpS });
  }
  const problems = [
    ...pass.problems,
    ...pass.runs.flatMap(({ run, problems: own }) => own.map((problem) => ({ ...problem, run }))),
  ];
  const present = new Set<string>();
  for (const problem of problems) {
    const key = `${'run' in problem ? problem.run : ''} ${problem.code}`;
    present.add(key);
    tellProblem(session, turn, key, problem);
  }
  for (const key of turn.lastProblems.keys()) if (!present.has(key)) turn.lastProblems.delete(key);
}

/** A problem is told when it begins or changes, not in every pass. */
function tellProblem(session: WatchSession, turn: Turn, key: string, problem: Problem & { run?: string }): void {
  if (turn.lastProblems.get(key) === problem.message) return;
  turn.lastProblems.set(key, problem.message);
  const run = problem.run !== undefined ? { run: problem.run } : {};
  session.onEvent({ kind: 'problem', ...run, message: problem.message, problem });
}

/** Seconds by which the wall clock ran away from the monotonic one since the last look; `undefined` when they agree. */
function clockJump(session: WatchSession, turn: Turn): number | undefined {
  const { clock } = session.context;
  const [wallMs, monotonicMs] = [clock.nowMs(), clock.monotonicMs()];
  const jumpMs = wallMs - turn.wallMs - (monotonicMs - turn.monotonicMs);
  turn.wallMs = wallMs;
  turn.monotonicMs = monotonicMs;
  return Math.abs(jumpMs) >= jumpLeastMs ? Math.round(jumpMs / 1000) : undefined;
}

async function noteInRuns(
  session: WatchSession,
  pass: PassOutcome,
  name: 'outage' | 'clock-jump',
  message: string,
  more: { seconds?: number; sinceUtc?: string },
): Promise<void> {
  const { context, settings } = session;
  for (const listing of pass.listing.runs) {
    if (session.runs.get(listing.key)?.state.method === undefined) continue;
    const run = runNameOf(session, listing);
    const held = await holdRecord({ context, outputFolder: settings.outputFolder, names: listing.names, run });
    if (!held.ok) continue;
    await held.value.append({ kind: 'exception', name, message, ...more });
    await held.value.release();
  }
}
