import type { Structure, StructureGroup } from '../pattern/structure.js';
import type { MethodSignal } from './method.js';
import { type PatternFit, patternFits } from './patternFits.js';

/** Which groups of the structure a listed signal is. */
export interface SignalMatch {
  readonly signal: MethodSignal;
  /** Indices of groups; empty when the structure has none that could be it. */
  readonly groups: readonly number[];
  /** The signal is one proton of an uneven CH2: half of its group. */
  readonly isHalf: boolean;
  readonly fit: PatternFit;
}

interface Option extends SignalMatch {
  readonly cost: number;
}

/** ppm by which estimated shifts are usually off. */
const estimatePpm = 0.4;
const shiftCostMax = 16;
/** A pattern that does not fit costs as much as an estimate that is off by 0.6 ppm. */
const misfitCost = 2.5;
const unmatchedCost = 25;
const joinedCost = 1;
const optionsMax = 60;
const stepsMax = 60_000;

/**
 * Finds which group of the structure each listed signal is: counts of nuclei must agree, and the sum of misfits in pattern and
 * estimated shift is smallest.
 *
 * @param signals    of one species
 * @param structure  its structure, for the observed element
 * @returns one match per signal, in order; no group is used twice
 */
export function matchSignals(signals: readonly MethodSignal[], structure: Structure): SignalMatch[] {
  const options = signals.map((signal) => optionsOf(signal, structure));
  const order = signals.map((_, index) => index).sort((a, b) => options[a]!.length - options[b]!.length || a - b);
  const room = structure.groups.map(() => 1);
  const taken: Option[] = new Array(signals.length);
  let best: readonly Option[] = [];
  let bestCost = Number.POSITIVE_INFINITY;
  let steps = 0;
  const visit = (depth: number, cost: number): void => {
    if (cost >= bestCost || ++steps > stepsMax) return;
    const index = order[depth];
    if (index === undefined) {
      best = [...taken];
      bestCost = cost;
      return;
    }
    for (const option of options[index]!) {
      const need = option.isHalf ? 0.5 : 1;
      if (option.groups.some((group) => room[group]! < need)) continue;
      for (const group of option.groups) room[group]! -= need;
      taken[index] = option;
      visit(depth + 1, cost + option.cost);
      for (const group of option.groups) room[group]! += need;
    }
  };
  visit(0, 0);
  return best.map(({ signal, groups, isHalf, fit }) => ({ signal, groups, isHalf, fit }));
}

function optionsOf(signal: MethodSignal, structure: Structure): Option[] {
  const { groups } = structure;
  const found: Option[] = [{ signal, groups: [], isHalf: false, fit: { fits: false }, cost: unmatchedCost }];
  for (const [index, group] of groups.entries()) {
    const fit = patternFits(signal.pattern, group, groups);
    const cost = shiftCost(signal, group) + (fit.fits ? 0 : misfitCost);
    if (group.nuclei === signal.nuclei) found.push({ signal, groups: [index], isHalf: false, fit, cost });
    else if (group.isDiastereotopic && group.nuclei === 2 * signal.nuclei)
      found.push({ signal, groups: [index], isHalf: true, fit, cost });
  }
  for (const joined of unions(signal, groups)) {
    const fits = joined.map((index) => patternFits(signal.pattern, groups[index]!, groups));
    const isTwin = new Set(joined.map((index) => groups[index]!.twin)).size === 1 && groups[joined[0]!]!.twin !== undefined;
    if (!fits.every(({ fits: one }) => one)) continue;
    const shift = joined.reduce((sum, index) => sum + shiftCost(signal, groups[index]!), 0) / joined.length;
    found.push({ signal, groups: joined, isHalf: false, fit: fits[0]!, cost: shift + (isTwin ? 0 : joinedCost) });
  }
  return found.sort((a, b) => a.cost - b.cost).slice(0, optionsMax);
}

/** Sets of two and more groups with the right count in sum: what a listed multiplet, or lines that coincide, may hold. */
function unions(signal: MethodSignal, groups: readonly StructureGroup[]): number[][] {
  const near = groups.map((_, index) => index).filter((index) => shiftCost(signal, groups[index]!) < shiftCostMax);
  const found: number[][] = [];
  const visit = (start: number, chosen: readonly number[], left: number): void => {
    if (found.length >= 400) return;
    if (left === 0 && chosen.length > 1) found.push([...chosen]);
    for (let place = start; place < near.length; place++) {
      const nuclei = groups[near[place]!]!.nuclei;
      if (nuclei <= left) visit(place + 1, [...chosen, near[place]!], left - nuclei);
    }
  };
  visit(0, [], signal.nuclei);
  return found;
}

function shiftCost(signal: MethodSignal, group: StructureGroup): number {
  const named = nameCost(signal.id, group.label);
  if (group.isExchangeable) return Math.max(0, 1 + named);
  if (group.estimatedShiftPpm === undefined) return 0;
  const [low, high] = signal.rangePpm ?? [signal.shiftPpm, signal.shiftPpm];
  const apart = Math.max(0, low - group.estimatedShiftPpm, group.estimatedShiftPpm - high);
  return Math.max(0, Math.min((apart / estimatePpm) ** 2, shiftCostMax) + named);
}

/** An id such as `CH2` or `OCH3-b` speaks for groups of that make and against others; any other name says nothing. */
function nameCost(id: string, label: string): number {
  const make = (name: string) => /(?:C|N|O|S)H[23]?(?![a-z0-9])/.exec(name)?.[0];
  const [own, other] = [make(id), make(label)];
  if (own === undefined || other === undefined) return 0;
  return own === other ? -1 : 2;
}
