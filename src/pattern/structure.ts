/** How surely a neighbour shows in the spectrum. */
export type CouplingKind =
  /** Two or three bonds, a coupling of several hertz: it splits. */
  | 'clear'
  /** Two or three bonds, but often below 3 Hz (aldehyde, =CH2): it may not be resolved. */
  | 'small'
  /** Four bonds (allyl, meta; five through a triple bond): shows when the lines are narrow. */
  | 'long'
  /** Exchangeable protons: by default they neither split nor are split. */
  | 'exchanging';

/** Nuclei of one other group that one nucleus of a group couples to. */
export interface Neighbour {
  /** `H` or another spin-1/2 element. */
  readonly element: string;
  /** Index into `Structure.groups`; absent for an element that is not the observed one. */
  readonly group?: number;
  /** `CH3`, `ArF` ... */
  readonly label: string;
  readonly count: number;
  readonly kind: CouplingKind;
  /** Usual size, Hz (common practice): to order splittings and to propose a method, never to measure. */
  readonly usualHz: number;
}

/** Equivalent nuclei of a structure. */
export interface StructureGroup {
  /** As chemists name it: `CH3`, `OCH2`, `ArH`, `=CH`, `OH`. */
  readonly label: string;
  /** Carriers of the nuclei (the atoms themselves for fluorine and others), indices into the molecule. */
  readonly atoms: readonly number[];
  readonly nuclei: number;
  readonly isExchangeable: boolean;
  readonly isAromatic: boolean;
  /** The protons of its CH2 (or the methyls of its CMe2) differ because of a stereocentre or a ring: splitting is not n + 1. */
  readonly isDiastereotopic: boolean;
  /** Carried by a saturated ring, where neighbours couple by angle: splitting is not n + 1. */
  readonly isInSaturatedRing: boolean;
  /** Set when a group was divided because two faces or sides differ; groups of one twin number may coincide. */
  readonly twin?: number;
  /** ppm, coarse (within about 0.6 ppm for most protons). */
  readonly estimatedShiftPpm?: number;
  readonly neighbours: readonly Neighbour[];
}

/** What splitting needs to know about a compound. */
export interface Structure {
  readonly smiles: string;
  readonly formula: string;
  /** g/mol; absent for an element without a standard atomic weight in the program. */
  readonly molarMass?: number;
  /** The nucleus observed: `H`, `F`, `P` ... */
  readonly element: string;
  readonly groups: readonly StructureGroup[];
}
