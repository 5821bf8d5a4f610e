import type { Method } from '../../method/method.js';
import type { RunState } from '../series.js';
import type { UsablePoint } from './usablePoints.js';

/** One-sided 95 % of a normal distribution. */
export const z95 = 1.645;
export const pointsInARowDefault = 2;

/** The lower 95 % bound lies above the target, on as many points in a row as the method asks. Once reached it stays so. */
export function targetReached(points: readonly UsablePoint[], method: Method): RunState | undefined {
  const target = method.conversion?.target;
  if (target === undefined) return undefined;
  const wanted = method.kinetics.pointsInARow ?? pointsInARowDefault;
  let row = 0;
  for (const { amounts, sha256 } of points) {
    const { conversion } = amounts;
    row = conversion && conversion.value - z95 * conversion.u >= target ? row + 1 : 0;
    if (row < wanted || !conversion) continue;
    const often = wanted === 1 ? 'one point' : `${wanted} points in a row`;
    const evidence = `conversion ${percent(conversion.value, 2)} % with its lower 95 % bound above ${percent(target, 1)} % on ${often}`;
    return { state: 'target-reached', since: sha256, evidence };
  }
  return undefined;
}

export function percent(value: number, digits: number): string {
  return (100 * value).toFixed(digits);
}
