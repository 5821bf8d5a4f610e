import { carrierKind, isExchangeable } from './carrierKind.js';
import { groupLabel } from './groupLabel.js';
import type { Sides } from './inequivalentSides.js';
import type { Molecule } from './molecule.js';

/** Nuclei of one element on one atom that are alike: the three of a methyl, one of an uneven `=CH2`, a fluorine. */
export interface SpinSite {
  readonly atom: number;
  readonly element: string;
  readonly count: number;
  /** Sites of one key are equivalent. */
  readonly key: string;
  readonly label: string;
  readonly isExchangeable: boolean;
  /** Bonds from the nucleus to its atom: 1 for hydrogen, 0 for the atom itself. */
  readonly reach: 0 | 1;
  /** Set on sites that a rigid bond tells apart. */
  readonly twin?: string;
}

/** Elements with a spin-1/2 isotope of full abundance. */
const spinElements = /^(?:F|P)$/;

/** Lists all nuclei that can couple, site by site, in the order of the atoms. */
export function spinSites(molecule: Molecule, sides: Sides, plainClasses: readonly number[]): SpinSite[] {
  return molecule.atoms.flatMap((own, atom): SpinSite[] => {
    const key = `${own.element}${sides.classes[atom]}`;
    const isSplit = sides.classes.some(
      (value, other) => plainClasses[other] === plainClasses[atom] && value !== sides.classes[atom],
    );
    const twin = isSplit ? { twin: `${plainClasses[atom]}` } : {};
    if (spinElements.test(own.element)) {
      const label = groupLabel(molecule, atom, own.element);
      return [{ atom, element: own.element, count: 1, key, label, isExchangeable: false, reach: 0, ...twin }];
    }
    if (own.hydrogens === 0) return [];
    const base = {
      atom,
      element: 'H',
      label: groupLabel(molecule, atom, 'H'),
      isExchangeable: isExchangeable(molecule, atom),
      reach: 1 as const,
    };
    if (!sides.unevenHydrogens.has(atom) || carrierKind(molecule, atom) !== 'alkene')
      return [{ ...base, count: own.hydrogens, key, ...twin }];
    return ['a', 'b'].map((side) => ({ ...base, count: 1, key: `${key}${side}`, twin: `uneven ${key}` }));
  });
}
