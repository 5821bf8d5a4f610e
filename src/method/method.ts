import type { Pattern } from '../pattern/pattern.js';

export type Role =
  | 'starting-material'
  | 'reagent'
  | 'catalyst'
  | 'intermediate'
  | 'product'
  | 'by-product'
  | 'impurity'
  | 'solvent'
  | 'internal-standard';

export type Use = 'quantify' | 'confirm' | 'ignore';

/** One diagnostic signal, normalised from either spelling of the method file. */
export interface MethodSignal {
  readonly id: string;
  /** `<species>/<signal>`: the key used everywhere downstream. */
  readonly key: string;
  /** Centre, ppm. For a range (`7.40-7.28`) its middle. */
  readonly shiftPpm: number;
  /** [low, high] ppm when the listing gives a range. */
  readonly rangePpm?: readonly [number, number];
  /** Searched on either side of the shift after referencing, ppm. Default 0.05. */
  readonly withinPpm: number;
  readonly pattern: Pattern;
  readonly nuclei: number;
  readonly use: Use;
  readonly moves: boolean;
  /** Other signal id of the same species -> J in Hz. Absent: not given in the method (may be inferred). */
  readonly coupled?: Readonly<Record<string, number>>;
  readonly crossCouplingsHz?: readonly number[];
  readonly t1S?: number;
}

export interface MethodSpecies {
  readonly id: string;
  readonly name: string;
  readonly role: Role;
  readonly smiles?: string;
  /** g/mol; from the file or from `smiles`. */
  readonly molarMass?: number;
  readonly molarMassU?: number;
  /** Moles formed per mole of the followed starting material. Default 1. */
  readonly stoichiometry: number;
  /** Mass fraction (purity) of an internal standard, g/g, and its standard uncertainty. */
  readonly massFraction?: number;
  readonly massFractionU?: number;
  /** Concentration of an internal standard in the tube, mol/L, and its standard uncertainty. */
  readonly concentrationMolPerL?: number;
  readonly concentrationMolPerLU?: number;
  readonly signals: readonly MethodSignal[];
}

export interface Limit {
  readonly species: string;
  readonly quantity: 'mole-fraction' | 'mass-fraction' | 'conversion' | 'unassigned';
  readonly atMost?: number;
  readonly atLeast?: number;
}

export interface Processing {
  /** Hz of exponential line broadening; `matched` derives it from the reference line. */
  readonly lineBroadeningHz: number | 'matched';
  /** Factor by which the FID is lengthened with zeros before the transform (rounded up to a power of two). */
  readonly zeroFilling: number;
  readonly phase: 'automatic' | 'none' | { readonly zeroDeg: number; readonly firstDeg: number };
  readonly baseline: 'automatic' | 'none';
}

export interface InputHints {
  readonly carrierPpmRecord?: string;
  readonly onsetPointsRecord?: string;
  readonly carrierPpm?: number;
  readonly onsetPoints?: number;
}

/** A method, read and normalised: everything downstream reads this and never the YAML. */
export interface Method {
  readonly title: string;
  readonly version: string;
  readonly sha256: string;
  readonly nucleus: string;
  readonly solvent?: string;
  readonly reference: { readonly signal: string; readonly shiftPpm?: number };
  readonly species: readonly MethodSpecies[];
  readonly conversion?: { readonly of: string; readonly to?: string; readonly target?: number };
  readonly limits: readonly Limit[];
  readonly purity?: { readonly of: string; readonly atLeast?: number };
  readonly residualSolvents?: { readonly limits: 'ich-q3c'; readonly of: string };
  readonly processing: Processing;
  readonly acquisition: {
    readonly relaxationDelayS?: number;
    readonly longestT1S?: number;
    readonly pulseAngleDeg?: number;
    readonly intervalS?: number;
  };
  readonly kinetics: {
    readonly models?: readonly string[];
    readonly pointsInARow?: number;
    readonly stalledAfterS?: number;
    readonly silentAfterS?: number;
  };
  /** Thresholds of the flags by name; every name and default stands in `qualityDefaults.ts`. */
  readonly quality: Readonly<Record<string, number>>;
  readonly input: InputHints;
}

/** The optional facts about one batch (`run.yaml`). */
export interface RunFile {
  readonly batch?: string;
  /** ISO 8601 UTC. */
  readonly started?: string;
  readonly sampleMassMg?: number;
  readonly sampleMassUMg?: number;
  readonly standardMassMg?: number;
  readonly standardMassUMg?: number;
  readonly notes?: string;
  /** Path of the run's own method, relative to the run folder. */
  readonly method?: string;
  /** Overrides the standard's purity of the method. */
  readonly standardMassFraction?: number;
  readonly standardMassFractionU?: number;
  readonly final?: boolean;
}
