import type { Limit, Method } from '../method/method.js';
import type { Amounts } from './amounts.js';

/** What became of one limit of the method. */
export interface LimitVerdict {
  readonly what: string;
  readonly bound: string;
  readonly value?: number;
  readonly u?: number;
  readonly verdict: 'pass' | 'fail' | 'not-decided' | 'not-measured';
  readonly words: string;
}

const z95 = 1.96;

/**
 * Judges every limit of the method, and the purity: a pass or fail only when the limit lies outside the 95 % interval.
 *
 * @returns one verdict a limit, in method order, then purity
 * @source common practice of decision rules with guard bands (JCGM 106:2012)
 */
export function judgeLimits(amounts: Amounts, method: Method): LimitVerdict[] {
  const verdicts = method.limits.map((limit) => judge(limit, foundFor(limit, amounts), nameOf(limit, method)));
  if (method.purity?.atLeast === undefined) return verdicts;
  const purity: Limit = { species: method.purity.of, quantity: 'mass-fraction', atLeast: method.purity.atLeast };
  return [...verdicts, judge(purity, amounts.purity?.result, `purity of ${method.purity.of}`)];
}

function foundFor(limit: Limit, amounts: Amounts): { value: number; u: number } | undefined {
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

function nameOf({ quantity, species }: Limit, method: Method): string {
  const name = method.species.find(({ id }) => id === species)?.name ?? species;
  return quantity === 'conversion' || quantity === 'unassigned' ? quantity : `${quantity.replace('-', ' ')} of ${name}`;
}

function judge({ atMost, atLeast }: Limit, found: { value: number; u: number } | undefined, what: string): LimitVerdict {
  const bound = [atMost !== undefined ? `at most ${atMost}` : '', atLeast !== undefined ? `at least ${atLeast}` : '']
    .filter((part) => part !== '')
    .join(', ');
  if (!found) return { what, bound, verdict: 'not-measured', words: `${what}: not measured` };
  const [low, high] = [found.value - z95 * found.u, found.value + z95 * found.u];
  const isOver = atMost !== undefined && low > atMost;
  const isUnder = atLeast !== undefined && high < atLeast;
  const isIn = (atMost === undefined || high <= atMost) && (atLeast === undefined || low >= atLeast);
  const verdict = isOver || isUnder ? 'fail' : isIn ? 'pass' : 'not-decided';
  const words = { pass: 'passes', fail: 'fails', 'not-decided': 'not decided: the limit lies inside the 95 % interval' }[verdict];
  return { what, bound, ...found, verdict, words: `${what}, ${bound}: ${words}` };
}
