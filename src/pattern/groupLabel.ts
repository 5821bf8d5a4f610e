import { carrierKind } from './carrierKind.js';
import { isCarbonyl } from './inequivalentSides.js';
import type { Molecule } from './molecule.js';

/**
 * Names a group of nuclei as chemists do: `CH3`, `OCH2`, `CH2Cl`, `ArCH3`, `=CH`, `CHO`, `ArH`, `OH`, `CF3`.
 *
 * @param molecule  plain graph
 * @param atom      one of the atoms that carry the nuclei (the nucleus itself when it is not a hydrogen)
 * @param element   the observed element
 * @returns a short label; different groups may share it
 */
export function groupLabel(molecule: Molecule, atom: number, element: string): string {
  if (element !== 'H') return heavyLabel(molecule, atom);
  const { hydrogens, element: carrier } = molecule.atoms[atom]!;
  const body = `${carrier}H${hydrogens > 1 ? hydrogens : ''}`;
  const around = molecule.adjacent[atom]!.map(([other]) => other);
  switch (carrierKind(molecule, atom)) {
    case 'aromatic':
      return 'ArH';
    case 'alkene':
      return `=${body}`;
    case 'alkyne':
      return '\u2261CH';
    case 'imine':
      return 'CH=N';
    case 'carbonyl':
      return around.some((other) => molecule.atoms[other]!.element === 'O' && molecule.adjacent[other]!.length > 1)
        ? 'OCHO'
        : 'CHO';
    case 'hetero':
      return around.some((other) => isCarbonyl(molecule, other)) ? (carrier === 'O' ? 'COOH' : `CO${body}`) : body;
    case 'sp3':
      return sp3Label(molecule, around, body);
  }
}

function sp3Label(molecule: Molecule, around: readonly number[], body: string): string {
  const elements = around.map((other) => molecule.atoms[other]!.element);
  const halogen = elements.find((element) => /^(?:F|Cl|Br|I)$/.test(element));
  if (halogen !== undefined) return `${body}${halogen}`;
  const front = ['O', 'N', 'S', 'P', 'Si', 'Sn', 'B'].find((element) => elements.includes(element));
  if (front !== undefined) return `${front}${body}`;
  if (around.some((other) => molecule.atoms[other]!.isAromatic)) return `Ar${body}`;
  if (around.some((other) => isCarbonyl(molecule, other))) return `CO${body}`;
  if (around.some((other) => carrierKind(molecule, other) === 'alkene')) return `=C${body}`;
  return body;
}

function heavyLabel(molecule: Molecule, atom: number): string {
  const { element } = molecule.atoms[atom]!;
  const carrier = molecule.adjacent[atom]![0]?.[0];
  if (element !== 'F' || carrier === undefined) return element;
  const { element: centre, hydrogens, isAromatic } = molecule.atoms[carrier]!;
  if (isAromatic) return 'ArF';
  const count = molecule.adjacent[carrier]!.filter(([other]) => molecule.atoms[other]!.element === 'F').length;
  return `${centre}${hydrogens > 0 ? `H${hydrogens > 1 ? hydrogens : ''}` : ''}F${count > 1 ? count : ''}`;
}
