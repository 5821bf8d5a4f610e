import type { Flag } from '../base/flag.js';

export type Verdict = 'matches' | 'differs' | 'crowded' | 'absent';

/** A drawn strip for the report: data, fit and residual on a common axis, thinned by minimum and maximum. */
export interface Strip {
  readonly firstPpm: number;
  readonly stepPpm: number;
  /** shapes (m), in units of the tallest point of the strip's data times `scale`. */
  readonly data: readonly number[];
  readonly fit: readonly number[];
  /** Arbitrary units of one strip unit. */
  readonly scale: number;
  /** Expected lines as sticks: shift in ppm, height as fitted in strip units. */
  readonly sticks: readonly { readonly shiftPpm: number; readonly height: number; readonly signal: string }[];
}

/** One measured diagnostic signal of one time point. */
export interface MeasuredSignal {
  readonly key: string;
  readonly species: string;
  readonly use: 'quantify' | 'confirm' | 'ignore';
  readonly nuclei: number;
  readonly shiftPpm: number;
  readonly shiftU?: number;
  readonly widthHz: number;
  /** Fitted area, arbitrary units x Hz, whole signal (all nuclei). */
  readonly area: number;
  readonly u: number;
  /** Plain integral over the signal's window, for cross-check; absent when the window is shared. */
  readonly integral?: number;
  readonly verdict: Verdict;
  readonly declared: string;
  readonly found?: string;
  /** Couplings found, Hz. */
  readonly couplingsHz?: readonly number[];
  /** Share of the area under the signal that the pattern leaves over, and where it is largest. */
  readonly leftOver?: { readonly share: number; readonly u: number; readonly shiftPpm: number };
  /** Best other pattern and its odds against the declared one. */
  readonly other?: { readonly pattern: string; readonly odds: number };
  readonly neighboursImplied?: number;
  /** Area per nucleus over that of the species' other signals, when both are measured. */
  readonly ratioToOthers?: { readonly value: number; readonly u: number };
  /** Upper limit of the area at 95 % when absent. */
  readonly areaUpper95?: number;
  /** Standard uncertainty of the area at zero area: 3.3 u0 detection, 10 u0 quantitation (ICH Q2). */
  readonly u0: number;
  /** Keys of signals fitted in the same region, and the correlation of their areas with this one. */
  readonly fittedWith: readonly { readonly key: string; readonly correlation: number }[];
  /** Verdict in words, e.g. "quartet as expected; 6 % left over at 4.105 ppm". */
  readonly words: string;
  readonly strip?: Strip;
}

/** A line or multiplet that no species explains. */
export interface Unassigned {
  readonly shiftPpm: number;
  readonly area: number;
  readonly u: number;
  readonly pattern: string;
  readonly couplingsHz?: readonly number[];
  readonly widthHz?: number;
  readonly suggestion?: string;
}

export interface SolventFinding {
  /** Name as in `ich-q3c-limits.csv`. */
  readonly name: string;
  readonly cas: string;
  /** Area per nucleus in the units of `MeasuredSignal.area`, jointly fitted over the solvent's signals. */
  readonly areaPerNucleus: number;
  readonly u: number;
  readonly u0: number;
  readonly evidence: 'found' | 'suggested' | 'not-detected';
  readonly words: string;
}

export interface Measurement {
  readonly signals: readonly MeasuredSignal[];
  readonly unassigned: readonly Unassigned[];
  readonly solvents: readonly SolventFinding[];
  /** Height of the tallest diagnostic line over the rms noise. */
  readonly signalToNoise: number;
  readonly lineShape: { readonly widthHz: number; readonly lorentzShare: number; readonly asymmetry: number };
  readonly flags: readonly Flag[];
}
