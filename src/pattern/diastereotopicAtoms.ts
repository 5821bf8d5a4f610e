import { carrierKind } from './carrierKind.js';
import type { Molecule } from './molecule.js';
import { symmetryClasses } from './symmetryClasses.js';

/** Bonds from a CH2 to the atom that makes its protons differ; further away the difference is rarely seen. */
const bondsMax = 2;

/**
 * CH2 groups whose two protons differ, and carbons whose two methyl groups do: marking one of the pair makes a stereocentre
 * of an atom nearby.
 *
 * @param molecule  plain graph
 * @param classes   shape (atoms), symmetry classes
 * @returns atoms of such CH2 groups and of such methyl groups
 * @source  definition of diastereotopic ligands (replacement test; common practice)
 */
export function diastereotopicAtoms(molecule: Molecule, classes: readonly number[]): ReadonlySet<number> {
  const found = new Set<number>();
  for (const [atom, { hydrogens }] of molecule.atoms.entries()) {
    if (carrierKind(molecule, atom) !== 'sp3') continue;
    const isCandidate = hydrogens === 2 || (hydrogens === 3 && hasTwinMethyl(molecule, classes, atom));
    if (!isCandidate) continue;
    const marks = molecule.atoms.map((_, index) => (index === atom ? 1 : 0));
    const marked = symmetryClasses(molecule, marks);
    const centre = hydrogens === 3 ? molecule.adjacent[atom]![0]![0] : atom;
    const near = within(molecule, centre, bondsMax);
    if ([...near].some((other) => other !== atom && other !== centre && isStereocentre(molecule, marked, other))) found.add(atom);
  }
  return found;
}

function hasTwinMethyl(molecule: Molecule, classes: readonly number[], atom: number): boolean {
  const centre = molecule.adjacent[atom]?.[0]?.[0];
  if (centre === undefined || carrierKind(molecule, centre) !== 'sp3') return false;
  return molecule.adjacent[centre]!.filter(([other]) => classes[other] === classes[atom]).length === 2;
}

function isStereocentre(molecule: Molecule, classes: readonly number[], atom: number): boolean {
  const { hydrogens } = molecule.atoms[atom]!;
  if (carrierKind(molecule, atom) !== 'sp3' || hydrogens > 1) return false;
  const around = molecule.adjacent[atom]!.map(([other]) => classes[other]!);
  return around.length + hydrogens === 4 && new Set(around).size === around.length;
}

function within(molecule: Molecule, start: number, bonds: number): Set<number> {
  const seen = new Set([start]);
  let front = [start];
  for (let step = 0; step < bonds; step++) {
    front = front.flatMap((atom) => molecule.adjacent[atom]!.map(([other]) => other)).filter((other) => !seen.has(other));
    for (const atom of front) seen.add(atom);
  }
  return seen;
}
