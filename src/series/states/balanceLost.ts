import type { RunState } from '../series.js';
import { beginningOf } from './beginningOf.js';
import { percent } from './targetReached.js';
import type { UsablePoint } from './usablePoints.js';

const tolerated = 0.05;
const row = 2;

/**
 * What became of the starting material no longer adds up to what was there: off by more than 5 % and 3 u, on two points in a row.
 *
 * Says nothing on a relative scale, where a balance cannot be drawn.
 */
export function balanceLost(points: readonly UsablePoint[]): RunState | undefined {
  const used = points.filter(({ amounts }) => amounts.massBalance !== undefined);
  const isOff = (index: number) => {
    const { value, u } = used[index]!.amounts.massBalance!;
    return Math.abs(value - 1) > Math.max(tolerated, 3 * u);
  };
  const side = (index: number) => Math.sign(used[index]!.amounts.massBalance!.value - 1);
  const begins = (index: number) =>
    index + 1 >= row &&
    Array.from({ length: row }, (_, back) => index - back).every((at) => isOff(at) && side(at) === side(index));
  const since = beginningOf(used.length, begins, (index) => Math.abs(used[index]!.amounts.massBalance!.value - 1) < tolerated);
  if (since === undefined) return undefined;
  const { value, u } = used[since]!.amounts.massBalance!;
  const evidence = `the followed species add up to ${percent(value, 1)} % (u ${percent(u, 1)} %) of what was there at the start: ${value < 1 ? 'precipitation, evaporation or an unseen species' : 'a species counted twice, or the start was taken too early'} may be the cause`;
  return { state: 'balance-lost', since: used[since]!.sha256, evidence };
}
