import type { Limit, Method, RunFile } from '../method/method.js';
import type { RunState, SeriesPoint } from './series.js';

const stalledPoints = 5;

/**
 * The states of a run that follow from its points, each with its evidence in words. Replaying the points in order gives the same
 * states at the same points.
 *
 * @param points by time
 * @returns states in the order in which they began; `running` when nothing else holds
 */
export function deriveStates(points: readonly SeriesPoint[], method: Method, runFile: RunFile): RunState[] {
  const usable = points.filter(({ status, amounts }) => status !== 'set-aside' && amounts !== undefined);
  const states = [targetReached(usable, method), stalled(usable, method), ...limitsBroken(usable, method)].filter(
    (state) => state !== undefined,
  );
  if (runFile.final === true) states.push({ state: 'final', since: 'run', evidence: 'the run file says that the run is final' });
  if (states.length > 0) return states;
  return [{ state: 'running', since: points[0]?.sha256 ?? 'run', evidence: `${usable.length} usable time points` }];
}

/** A state that holds now, dated back to the point since which it has held without a break: a night is not told of it twice. */
function lasting(
  points: readonly SeriesPoint[],
  find: (points: readonly SeriesPoint[]) => RunState | undefined,
): RunState | undefined {
  const now = find(points);
  if (!now) return undefined;
  let count = points.length;
  while (count > 1 && find(points.slice(0, count - 1))) count -= 1;
  return { ...now, since: points[count - 1]!.sha256 };
}

/** The lower 95 % bound lies above the target, on as many points in a row as the method asks. */
function targetReached(points: readonly SeriesPoint[], method: Method): RunState | undefined {
  const target = method.conversion?.target;
  if (target === undefined) return undefined;
  const wanted = method.kinetics.pointsInARow ?? 2;
  let row = 0;
  for (const { amounts, sha256 } of points) {
    const conversion = amounts?.conversion;
    row = conversion && conversion.value - 1.645 * conversion.u >= target ? row + 1 : 0;
    if (row < wanted || !conversion) continue;
    const evidence = `conversion ${(100 * conversion.value).toFixed(2)} % with its lower 95 % bound above ${(100 * target).toFixed(1)} % on ${wanted} points in a row`;
    return { state: 'target-reached', since: sha256, evidence };
  }
  return undefined;
}

/** The slope of the last points cannot be told from zero while the target is away. */
function stalled(points: readonly SeriesPoint[], method: Method): RunState | undefined {
  const target = method.conversion?.target;
  const last = points.slice(-stalledPoints).filter(({ amounts }) => amounts?.conversion);
  if (target === undefined || last.length < stalledPoints) return undefined;
  const final = last.at(-1)!;
  const value = final.amounts!.conversion!.value;
  const span = final.elapsedS - last[0]!.elapsedS;
  const needed = method.kinetics.stalledAfterS ?? 0;
  if (value >= target - 0.01 || value < 0.02 || span < needed) return undefined;
  const { slope, u } = slopeOf(last);
  const perSpan = slope * span;
  if (Math.abs(slope) > 2 * u || 2 * u * span > 0.25 * (target - value)) return undefined;
  const evidence = `conversion moved by ${(100 * perSpan).toFixed(2)} % over ${(span / 60).toFixed(0)} min, not to be told from zero, with the target ${(100 * (target - value)).toFixed(1)} % away`;
  return { state: 'stalled', since: last[0]!.sha256, evidence };
}

function slopeOf(points: readonly SeriesPoint[]): { slope: number; u: number } {
  const data = points.map(({ elapsedS, amounts }) => ({
    t: elapsedS,
    x: amounts!.conversion!.value,
    w: amounts!.conversion!.u ** -2,
  }));
  const s = data.reduce((sum, { w }) => sum + w, 0);
  const mean = data.reduce((sum, { w, t }) => sum + w * t, 0) / s;
  const sxx = data.reduce((sum, { w, t }) => sum + w * (t - mean) ** 2, 0);
  const slope = data.reduce((sum, { w, t, x }) => sum + w * (t - mean) * x, 0) / sxx;
  return { slope, u: 1 / Math.sqrt(sxx) };
}

/** Limits of the method that are broken at the last point, each since the point at which it began. */
function limitsBroken(points: readonly SeriesPoint[], method: Method): RunState[] {
  return method.limits.flatMap((limit) => lasting(points, (part) => brokenLimit(part, method, limit)) ?? []);
}

/** Beyond the 95 % bound, and for the starting material only once the target is reached or no target is set. */
function brokenLimit(points: readonly SeriesPoint[], method: Method, limit: Limit): RunState | undefined {
  const last = points.at(-1);
  const found = limit.quantity === 'mole-fraction' ? last?.amounts?.species[limit.species] : undefined;
  if (!last?.amounts || found?.moleFraction === undefined) return undefined;
  const { conversion } = last.amounts;
  const target = method.conversion?.target;
  const isEnd = target === undefined || (conversion !== undefined && conversion.value >= target);
  if (limit.species === method.conversion?.of && !isEnd) return undefined;
  const [value, u] = [found.moleFraction, found.moleFractionU ?? 0];
  const isOver = limit.atMost !== undefined && value - 1.645 * u > limit.atMost;
  const isUnder = limit.atLeast !== undefined && isEnd && value + 1.645 * u < limit.atLeast;
  if (!isOver && !isUnder) return undefined;
  const bound = isOver ? `above ${limit.atMost}` : `below ${limit.atLeast}`;
  return {
    state: 'limit-broken',
    since: last.sha256,
    evidence: `mole fraction of ${limit.species} is ${value.toFixed(4)}, ${bound} beyond its 95 % interval`,
  };
}
