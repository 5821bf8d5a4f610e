import type { Method, RunFile } from '../method/method.js';
import type { RunState, SeriesPoint } from './series.js';
import { balanceLost } from './states/balanceLost.js';
import { limitBroken } from './states/limitBroken.js';
import { newSignals } from './states/newSignal.js';
import { stalled } from './states/stalled.js';
import { targetReached } from './states/targetReached.js';
import { usablePoints } from './states/usablePoints.js';

/**
 * The states of a run that follow from its points, each with its evidence in words. Every rule looks backwards only: replaying the points
 * in order gives the same states, begun at the same points.
 *
 * `silent` and `trouble` depend on the clock and the share: the watch tells them.
 *
 * @param points by time
 * @returns states in the order in which they began, one per state and point; `running` when nothing else holds
 */
export function deriveStates(points: readonly SeriesPoint[], method: Method, runFile: RunFile): RunState[] {
  const usable = usablePoints(points);
  const found = [
    targetReached(usable, method),
    stalled(usable, method),
    ...method.limits.map((limit) => limitBroken(usable, method, limit)),
    ...newSignals(usable, method),
    balanceLost(usable),
  ].filter((state) => state !== undefined);
  const place = new Map(points.map(({ sha256 }, index) => [sha256, index]));
  const states = joined(found).sort((a, b) => place.get(a.since)! - place.get(b.since)!);
  if (runFile.final === true) states.push({ state: 'final', since: 'run', evidence: 'the run file says that the run is final' });
  if (states.length > 0) return states;
  return [{ state: 'running', since: points[0]?.sha256 ?? 'run', evidence: `${usable.length} usable time points` }];
}

/** Two limits broken at one point are one event with two reasons: a message has one key per state and point. */
function joined(states: readonly RunState[]): RunState[] {
  const byKey = new Map<string, RunState>();
  for (const state of states) {
    const key = `${state.state} ${state.since}`;
    const known = byKey.get(key);
    byKey.set(key, known ? { ...known, evidence: `${known.evidence}; ${state.evidence}` } : state);
  }
  return [...byKey.values()];
}
