import type { Method } from '../../method/method.js';
import type { RunState } from '../series.js';
import { type Track, trackUnassigned } from '../trackUnassigned.js';
import { beginningOf } from './beginningOf.js';
import { percent } from './targetReached.js';
import type { UsablePoint } from './usablePoints.js';

const leastShare = 0.002;
const pointsBefore = 2;
const lookBack = 4;
const sightsWanted = 3;

/**
 * A line that no species explains was not there at the beginning, is seen in three of the last four points, holds 0.2 % of the known area
 * and has grown by more than 3 u since it was first seen.
 *
 * @returns one state a line
 */
export function newSignals(points: readonly UsablePoint[], method: Method): RunState[] {
  return trackUnassigned(points, method).flatMap((track) => newSignal(points, track) ?? []);
}

function newSignal(points: readonly UsablePoint[], track: Track): RunState | undefined {
  const first = track[0]!;
  if (first.index < pointsBefore || track.length < sightsWanted) return undefined;
  const byIndex = new Map(track.map((sight) => [sight.index, sight]));
  const sightsUpTo = (index: number, count: number) =>
    Array.from({ length: count }, (_, back) => index - back).filter((at) => byIndex.has(at)).length;
  const begins = (index: number) => {
    const sight = byIndex.get(index);
    if (!sight || sight.share < leastShare || sightsUpTo(index, lookBack) < sightsWanted) return false;
    return sight.share - first.share > 3 * Math.hypot(sight.shareU, first.shareU);
  };
  const since = beginningOf(points.length, begins, (index) => sightsUpTo(index, lookBack) === 0);
  if (since === undefined) return undefined;
  const { shiftPpm, share, pattern, suggestion } = byIndex.get(since)!;
  const guess = suggestion !== undefined ? `; ${suggestion} lies there` : '';
  const evidence = `${pattern} at ${shiftPpm.toFixed(3)} ppm that no species explains has grown from ${percent(first.share, 2)} % to ${percent(share, 2)} % of the known area${guess}`;
  return { state: 'new-signal', since: points[since]!.sha256, evidence };
}
