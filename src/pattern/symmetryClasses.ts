import type { Molecule } from './molecule.js';

/**
 * Sorts the atoms of a structure into classes that its constitution cannot tell apart.
 *
 * @param molecule  plain graph
 * @param marks     shape (atoms), optional; atoms with different marks are never in one class
 * @returns shape (atoms), class numbers that do not depend on the order of the atoms
 * @source  refinement by neighbours (H. L. Morgan, J. Chem. Doc. 5 (1965) 107-113), each class checked by marking one atom at a
 *          time: atoms are alike only when the refined structures are
 */
export function symmetryClasses(molecule: Molecule, marks: readonly number[] = []): number[] {
  const refined = refine(molecule, startClasses(molecule, marks));
  const counts = new Map<number, number[]>();
  for (const [atom, value] of refined.entries()) counts.set(value, [...(counts.get(value) ?? []), atom]);
  const names = refined.map((value, atom) => {
    if (counts.get(value)!.length === 1) return `${value}`;
    // Refinement alone calls some unlike atoms alike (two rings of three against one of six); marking one of them tells.
    const marked = refine(molecule, rank(refined.map((other, index) => `${pad(other)}${index === atom ? '*' : ''}`)));
    return `${value} ${marked[atom]} ${surroundings(molecule, marked).sort().join(';')}`;
  });
  return rank(names);
}

function startClasses(molecule: Molecule, marks: readonly number[]): number[] {
  return rank(
    molecule.atoms.map((atom, index) =>
      [
        atom.element,
        atom.massNumber,
        atom.charge,
        atom.hydrogens,
        molecule.adjacent[index]!.length,
        atom.isAromatic,
        atom.isInRing,
        marks[index] ?? 0,
      ].join(' '),
    ),
  );
}

function refine(molecule: Molecule, start: readonly number[]): number[] {
  let classes = [...start];
  for (let count = new Set(classes).size; ; ) {
    const names = surroundings(molecule, classes);
    classes = rank(names);
    const next = new Set(classes).size;
    if (next === count) return classes;
    count = next;
  }
}

/** Each atom as its class and the classes around it: what two refined structures must share to be alike. */
function surroundings(molecule: Molecule, classes: readonly number[]): string[] {
  return classes.map((value, atom) => {
    const around = molecule.adjacent[atom]!.map(([other, bond]) => {
      const { order, isAromatic } = molecule.bonds[bond]!;
      return `${isAromatic ? 'a' : order}${pad(classes[other]!)}`;
    });
    return `${pad(value)} ${around.sort().join(' ')}`;
  });
}

/** Numbers names by their order, so that the numbers depend on the names alone. */
function rank(names: readonly string[]): number[] {
  const order = new Map([...new Set(names)].sort().map((name, index) => [name, index]));
  return names.map((name) => order.get(name)!);
}

function pad(value: number): string {
  return String(value).padStart(4, '0');
}
