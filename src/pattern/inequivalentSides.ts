import type { Molecule } from './molecule.js';
import { symmetryClasses } from './symmetryClasses.js';

/** Sides of a structure that its constitution alone does not tell apart, but the space around a double bond does. */
export interface Sides {
  /** shape (atoms): classes with alike branches told apart where a double or amide bond holds them in place. */
  readonly classes: readonly number[];
  /** Atoms with two hydrogens of their own that differ: `=CH2` beside an uneven end. */
  readonly unevenHydrogens: ReadonlySet<number>;
}

/**
 * Tells apart what is cis and trans: the two branches (or hydrogens) on one end of a C=C double bond whose other end bears two
 * different substituents, and the two branches on an amide nitrogen.
 *
 * @param molecule  plain graph
 * @returns classes and the atoms whose two hydrogens differ
 * @source  common practice (hindered rotation)
 */
export function inequivalentSides(molecule: Molecule): Sides {
  const classes = symmetryClasses(molecule);
  const marks = new Array<number>(molecule.atoms.length).fill(0);
  const unevenHydrogens = new Set<number>();
  for (const [near, far] of rigidBonds(molecule)) {
    const own = branches(molecule, near, far);
    if (!isUneven(molecule, classes, near, far)) continue;
    const [first, second] = own;
    if (molecule.atoms[near]!.hydrogens === 2) unevenHydrogens.add(near);
    if (first !== undefined && second !== undefined && classes[first] === classes[second]) {
      // Which of the two is cis is not asked: one of them is marked, and everything behind it follows.
      marks[first] = 1;
    }
  }
  return { classes: marks.some((mark) => mark !== 0) ? symmetryClasses(molecule, marks) : classes, unevenHydrogens };
}

/** Ordered pairs (near end, far end) of bonds that do not turn. */
function rigidBonds(molecule: Molecule): [number, number][] {
  return molecule.bonds.flatMap(({ atoms: [a, b], order, isAromatic }): [number, number][] => {
    const isAlkene = order === 2 && !isAromatic && molecule.atoms[a]!.element === 'C' && molecule.atoms[b]!.element === 'C';
    if (isAlkene)
      return [
        [a, b],
        [b, a],
      ];
    if (order !== 1 || isAromatic) return [];
    return (
      [
        [a, b],
        [b, a],
      ] as [number, number][]
    ).filter(([nitrogen, carbonyl]) => molecule.atoms[nitrogen]!.element === 'N' && isCarbonyl(molecule, carbonyl));
  });
}

function isUneven(molecule: Molecule, classes: readonly number[], near: number, far: number): boolean {
  if (isCarbonyl(molecule, far) && molecule.atoms[near]!.element === 'N') return true;
  const others = branches(molecule, far, near);
  const hydrogens = molecule.atoms[far]!.hydrogens;
  if (others.length + hydrogens < 2) return false;
  return hydrogens === 1 || (hydrogens === 0 && classes[others[0]!] !== classes[others[1]!]);
}

function branches(molecule: Molecule, atom: number, except: number): number[] {
  return molecule.adjacent[atom]!.map(([other]) => other).filter((other) => other !== except);
}

/** A carbon with a doubly bound oxygen. */
export function isCarbonyl(molecule: Molecule, atom: number): boolean {
  return (
    molecule.atoms[atom]!.element === 'C' &&
    molecule.adjacent[atom]!.some(([other, bond]) => molecule.bonds[bond]!.order === 2 && molecule.atoms[other]!.element === 'O')
  );
}
