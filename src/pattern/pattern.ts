/** One factor of a first-order pattern: `t` with its coupling is `{ letter: 't', neighbours: 2, couplingHz: 7.1 }`. */
export interface Splitting {
  readonly letter: 's' | 'd' | 't' | 'q' | 'quint' | 'sext' | 'sept' | 'oct' | 'non';
  /** Number of equivalent spin-1/2 neighbours: lines minus one. */
  readonly neighbours: number;
  /** Hz; absent when the text gives none. */
  readonly couplingHz?: number;
}

/** A splitting pattern as written: `s`, `q`, `dd`, `br s`, `m`. */
export interface Pattern {
  /** As printed back, e.g. `dq`, `br s`, `m`. */
  readonly text: string;
  /** Empty for `s` and for `m`. */
  readonly splittings: readonly Splitting[];
  readonly isBroad: boolean;
  /** `m`: the lines are not declared. */
  readonly isMultiplet: boolean;
}

/** One expected line: offset from the signal's shift and its share of the signal's area. */
export interface Line {
  /** Hz; positive is higher frequency (higher shift). */
  readonly offsetHz: number;
  /** Shares of one signal sum to 1. */
  readonly share: number;
}
