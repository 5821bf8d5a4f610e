import { isCarbonyl } from './inequivalentSides.js';
import type { Molecule } from './molecule.js';

/** What kind of atom carries a nucleus. */
export type CarrierKind = 'sp3' | 'alkene' | 'alkyne' | 'aromatic' | 'carbonyl' | 'imine' | 'hetero';

/** Classifies an atom by its bonds. */
export function carrierKind(molecule: Molecule, atom: number): CarrierKind {
  const { element, isAromatic } = molecule.atoms[atom]!;
  if (element !== 'C') return 'hetero';
  if (isAromatic) return 'aromatic';
  if (isCarbonyl(molecule, atom)) return 'carbonyl';
  const orders = molecule.adjacent[atom]!.map(
    ([other, bond]) => [molecule.bonds[bond]!.order, molecule.atoms[other]!.element] as const,
  );
  if (orders.some(([order]) => order === 3)) return 'alkyne';
  if (orders.some(([order, other]) => order === 2 && other !== 'C')) return 'imine';
  return orders.some(([order]) => order === 2) ? 'alkene' : 'sp3';
}

/** Whether the hydrogens of an atom exchange: those on oxygen, nitrogen and sulphur. */
export function isExchangeable(molecule: Molecule, atom: number): boolean {
  return /^(?:O|N|S)$/.test(molecule.atoms[atom]!.element);
}
