/** Magnetically equivalent spin-1/2 nuclei: one chemical shift, one coupling to every other nucleus. */
export interface SpinGroup {
  /** The signal whose line list the group adds to; two groups of one signal are chemically, not magnetically, equivalent. */
  readonly signal: string;
  /** Number of nuclei. */
  readonly nuclei: number;
  /** Hz, on any common scale. */
  readonly frequencyHz: number;
}

/** Coupled groups as the spin Hamiltonian sees them. */
export interface SpinSystem {
  readonly groups: readonly SpinGroup[];
  /** shape (groups x groups), symmetric, Hz; the diagonal is not used (it cannot be seen). */
  readonly couplingsHz: readonly (readonly number[])[];
}

/** All transitions of a system, merged into lines. */
export interface SpinLines {
  /** shape (n), Hz on the scale of the groups, descending. */
  readonly frequencyHz: Float64Array;
  /** shape (n), summing to the number of nuclei. */
  readonly intensity: Float64Array;
  /** shape (n x signals) row by row: squared transition moments of each signal's nuclei, weighted as the intensity. */
  readonly ownMoments: Float64Array;
  readonly signals: readonly string[];
}
