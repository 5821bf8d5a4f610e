/** One non-hydrogen atom (or an isotope-labelled hydrogen) of a structure, as far as splitting needs it. */
export interface MoleculeAtom {
  readonly element: string;
  /** Mass number when the structure names an isotope (`[13C]`, `[2H]`), else 0. */
  readonly massNumber: number;
  readonly charge: number;
  /** Attached hydrogens of natural composition. */
  readonly hydrogens: number;
  readonly isAromatic: boolean;
  readonly isInRing: boolean;
}

export interface MoleculeBond {
  readonly atoms: readonly [number, number];
  /** 1, 2 or 3 of the localised structure. */
  readonly order: number;
  readonly isAromatic: boolean;
}

/** A structure as a plain graph. */
export interface Molecule {
  readonly atoms: readonly MoleculeAtom[];
  readonly bonds: readonly MoleculeBond[];
  /** atom -> its bonds, as [neighbour, bond index]. */
  readonly adjacent: readonly (readonly (readonly [number, number])[])[];
}
