import type { Quantity } from '../../base/quantity.js';
import type { Limit, Method } from '../../method/method.js';
import type { RunState } from '../series.js';
import { beginningOf } from './beginningOf.js';
import { z95 } from './targetReached.js';
import type { UsablePoint } from './usablePoints.js';

/**
 * A limit of the method is broken beyond the 95 % bound. What only an end product must keep (a lower limit, or what is left of the
 * starting material) is judged once the target is reached, or when no target is set.
 */
export function limitBroken(points: readonly UsablePoint[], method: Method, limit: Limit): RunState | undefined {
  const verdicts = points.map((point) => judge(point, method, limit));
  const since = beginningOf(
    points.length,
    (index) => verdicts[index]?.isBroken === true,
    (index) => verdicts[index]?.isKept === true,
  );
  if (since === undefined) return undefined;
  const { found, isOver } = verdicts[since]!;
  const bound = isOver ? `above ${limit.atMost}` : `below ${limit.atLeast}`;
  const evidence = `${nameOf(limit)} is ${found.value.toFixed(4)} (u ${found.u.toFixed(4)}), ${bound} beyond its 95 % bound`;
  return { state: 'limit-broken', since: points[since]!.sha256, evidence };
}

interface Judged {
  readonly found: Quantity;
  readonly isOver: boolean;
  readonly isBroken: boolean;
  readonly isKept: boolean;
}

function judge({ amounts }: UsablePoint, method: Method, limit: Limit): Judged | undefined {
  const found = foundFor(amounts, limit);
  if (!found) return undefined;
  const target = method.conversion?.target;
  const isEnd = target === undefined || (amounts.conversion !== undefined && amounts.conversion.value >= target);
  const isForEnd = limit.species === method.conversion?.of && limit.quantity === 'mole-fraction';
  const { value, u } = found;
  const isOver = limit.atMost !== undefined && (isEnd || !isForEnd) && value - z95 * u > limit.atMost;
  const isUnder = limit.atLeast !== undefined && isEnd && value + z95 * u < limit.atLeast;
  const isKept = (limit.atMost === undefined || value <= limit.atMost) && (limit.atLeast === undefined || value >= limit.atLeast);
  return { found, isOver, isBroken: isOver || isUnder, isKept };
}

function foundFor(amounts: UsablePoint['amounts'], limit: Limit): Quantity | undefined {
  switch (limit.quantity) {
    case 'mole-fraction': {
      const species = amounts.species[limit.species];
      return species?.moleFraction !== undefined ? { value: species.moleFraction, u: species.moleFractionU ?? 0 } : undefined;
    }
    case 'conversion':
      return amounts.conversion;
    case 'mass-fraction':
      return amounts.purity?.result;
    case 'unassigned':
      return amounts.unassignedShare;
  }
}

function nameOf({ quantity, species }: Limit): string {
  if (quantity === 'conversion') return 'conversion';
  return quantity === 'unassigned' ? 'the unassigned share' : `${quantity.replace('-', ' ')} of ${species}`;
}
