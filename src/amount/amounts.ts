import type { Flag } from '../base/flag.js';
import type { Quantity } from '../base/quantity.js';

/** Amount of one species at one time point. `unit` holds for all species of the point. */
export interface SpeciesAmount {
  /** mmol per g of sample, mol/L, or relative (area per nucleus), see `Amounts.unit`. */
  readonly amount: number;
  readonly u: number;
  readonly moleFraction?: number;
  readonly moleFractionU?: number;
  /** Below the detection (3.3 u0) or quantitation (10 u0) limit. */
  readonly below?: 'detection' | 'quantitation';
  readonly detection?: number;
  readonly quantitation?: number;
  /** How far the species' signals disagree: chi-square over degrees of freedom, when it has two or more. */
  readonly agreement?: number;
}

/** One line of an uncertainty budget (JCGM 100:2008). */
export interface BudgetLine {
  readonly quantity: string;
  readonly value: number;
  readonly u: number;
  readonly unit: string;
  readonly sensitivity: number;
  /** |sensitivity| x u, in the unit of the result. */
  readonly contribution: number;
  readonly degreesOfFreedom?: number;
}

export interface Budget {
  readonly result: Quantity;
  readonly lines: readonly BudgetLine[];
  readonly effectiveDegreesOfFreedom?: number;
  readonly coverageFactor: number;
  readonly expandedU: number;
}

export interface ResidualSolvent {
  readonly name: string;
  readonly cas: string;
  readonly ppm?: number;
  readonly u?: number;
  readonly limitPpm: number;
  readonly class: number;
  readonly verdict: 'below' | 'above' | 'near' | 'not-detected';
  readonly detectablePpm?: number;
}

/** Everything derived from one point's areas, the method and the run file. A pure function of those. */
export interface Amounts {
  readonly unit: 'mmol/g' | 'mol/L' | 'relative';
  readonly species: Readonly<Record<string, SpeciesAmount>>;
  readonly conversion?: Quantity;
  readonly yield?: Quantity;
  readonly selectivity?: Quantity;
  readonly purity?: Budget;
  /** Purity by the 100 % method (normalisation), mole and mass basis. */
  readonly purityByNormalisation?: { readonly moleFraction: Quantity; readonly massFraction?: Quantity };
  readonly residualSolvents?: readonly ResidualSolvent[];
  /** Sum over the followed chain (starting material, intermediates, products by stoichiometry) over that at time zero. */
  readonly massBalance?: Quantity;
  /** Area of what no species explains, as a share of that of the fraction-bearing species (by protons). */
  readonly unassignedShare?: Quantity;
  readonly flags: readonly Flag[];
}
