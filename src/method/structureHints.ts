import { readStructure } from '../pattern/readStructure.js';
import type { StructureGroup } from '../pattern/structure.js';
import { matchSignals } from './matchSignals.js';
import type { MethodSpecies } from './method.js';

/** What the structure says of two signals: they are neighbours, they are not, or it cannot tell. */
export type Hint = 'neighbours' | 'apart' | 'unknown';

/** ppm: a match further from the estimate than this says nothing. */
const trustedPpm = 1.2;

const known = new WeakMap<MethodSpecies, (a: number, b: number) => Hint>();

/**
 * Asks the structure of a species which of its signals couple. Only signals that are one group of protons each, with a fitting
 * pattern near the estimated shift, get an answer.
 *
 * @param species  with or without `smiles`
 * @returns a question: indices of two signals -> answer
 */
export function structureHints(species: MethodSpecies): (a: number, b: number) => Hint {
  const before = known.get(species);
  if (before !== undefined) return before;
  const hints = ask(species);
  known.set(species, hints);
  return hints;
}

function ask(species: MethodSpecies): (a: number, b: number) => Hint {
  const read = species.smiles === undefined ? undefined : readStructure(species.smiles);
  if (read === undefined || !read.ok) return () => 'unknown';
  const { groups } = read.value;
  const matches = matchSignals(species.signals, read.value);
  const groupOf = matches.map(({ signal, groups: own, fit }): number | undefined => {
    const group = groups[own[0] ?? -1];
    const apart = Math.abs((group?.estimatedShiftPpm ?? Number.POSITIVE_INFINITY) - signal.shiftPpm);
    return own.length === 1 && fit.fits && apart <= trustedPpm ? own[0] : undefined;
  });
  return (a, b) => {
    const [left, right] = [groupOf[a], groupOf[b]];
    if (left === undefined || right === undefined || left === right) return 'unknown';
    return couples(groups[left]!, right) || couples(groups[right]!, left) ? 'neighbours' : 'apart';
  };
}

function couples(group: StructureGroup, other: number): boolean {
  return group.neighbours.some(({ group: index }) => index === other);
}
