import type { Pattern } from '../pattern/pattern.js';
import type { StructureGroup } from '../pattern/structure.js';

/** Whether a group can show a listed pattern, and on what condition. */
export interface PatternFit {
  readonly fits: boolean;
  /** `exchanging`: only when OH or NH couples. `uneven`: only because the protons of a CH2 or ring differ. `unresolved`: broad. */
  readonly condition?: 'exchanging' | 'uneven' | 'unresolved';
}

interface Unit {
  readonly count: number;
  readonly isRequired: boolean;
}

/**
 * Whether the neighbours of a group can give a listed pattern: every clear neighbour must show, small and four-bond ones may.
 *
 * @param pattern  as listed
 * @param group    of the structure
 * @param groups   all groups of the structure
 * @returns the verdict; a multiplet fits anything
 * @source  n + 1 rule (common practice)
 */
export function patternFits(pattern: Pattern, group: StructureGroup, groups: readonly StructureGroup[]): PatternFit {
  if (pattern.isMultiplet) return { fits: true };
  const factors = pattern.splittings.map(({ neighbours }) => neighbours);
  const plain = unitsOf(group, groups, false);
  if (canForm(factors, plain)) return { fits: true };
  if (pattern.isBroad && factors.length === 0) return { fits: true, condition: 'unresolved' };
  const isRing = [group, ...neighboursOf(group, groups)].some((one) => one.isInSaturatedRing);
  // Couplings in a ring go by angle and may all be small: cyclopentene shows its alkene protons as a singlet.
  if (isRing && factors.length === 0) return { fits: true, condition: 'uneven' };
  if (isUneven(group, groups) && factors.length > 0) {
    const loose = plain.map((unit) => ({ ...unit, isRequired: false }));
    const single = loose.flatMap(({ count }) => Array.from({ length: count }, () => ({ count: 1, isRequired: false })));
    // The proton beside it on the same carbon.
    if (canForm(factors, [...single, { count: 1, isRequired: false }])) return { fits: true, condition: 'uneven' };
  }
  return canForm(factors, unitsOf(group, groups, true)) ? { fits: true, condition: 'exchanging' } : { fits: false };
}

function isUneven(group: StructureGroup, groups: readonly StructureGroup[]): boolean {
  return [group, ...neighboursOf(group, groups)].some((one) => one.isDiastereotopic || one.isInSaturatedRing);
}

function neighboursOf(group: StructureGroup, groups: readonly StructureGroup[]): StructureGroup[] {
  return group.neighbours.flatMap((neighbour) => (neighbour.group === undefined ? [] : [groups[neighbour.group]!]));
}

function unitsOf(group: StructureGroup, groups: readonly StructureGroup[], withExchanging: boolean): Unit[] {
  return group.neighbours.flatMap(({ kind, count, group: index }): Unit[] => {
    if (kind === 'exchanging') return withExchanging ? [{ count, isRequired: false }] : [];
    if (group.isExchangeable) return [];
    const isRequired = kind === 'clear';
    const isDivisible = !isRequired || (index !== undefined && groups[index]!.isDiastereotopic);
    if (!isDivisible) return [{ count, isRequired }];
    const whole = kind === 'small' ? [{ count, isRequired }] : [];
    return count === 1 || kind === 'small'
      ? [{ count, isRequired }]
      : [...whole, ...Array.from({ length: count }, () => ({ count: 1, isRequired }))];
  });
}

/** Whether units can be dealt out so that each factor gets exactly its number of neighbours. */
function canForm(factors: readonly number[], units: readonly Unit[]): boolean {
  let states = new Map([[factors.join(','), factors]]);
  for (const { count, isRequired } of units) {
    const next = new Map<string, readonly number[]>();
    for (const rest of states.values()) {
      if (!isRequired) next.set(rest.join(','), rest);
      for (const [index, room] of rest.entries()) {
        if (room < count) continue;
        const filled = rest.map((value, other) => (other === index ? value - count : value));
        next.set(filled.join(','), filled);
      }
    }
    states = next;
  }
  return [...states.values()].some((rest) => rest.every((room) => room === 0));
}
