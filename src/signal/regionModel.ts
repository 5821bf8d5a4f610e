import type { LineComponent } from './lineComponents.js';

/** One line of a term: where it stands from the term's shift, and how it moves when a coupling changes. */
export interface TermLine {
  /** Hz from the term's shift. */
  readonly offsetHz: number;
  readonly share: number;
  /** d offset / d coupling for each of the term's couplings; empty when the term has none. */
  readonly perCoupling: readonly number[];
  /** Added to the width of the term, Hz; absent: 0. */
  readonly extraWidthHz?: number;
  /** Which component of the shared line shape this is, and its share of the line; absent: the whole line. */
  readonly component?: number;
  readonly componentShare?: number;
}

/** One linear component of a region: a pattern of lines with one area. Numbers are indices into the region's parameters. */
export interface Term {
  /** Key of the signal it belongs to, or a name in brackets for what no signal asks for. */
  readonly key: string;
  readonly lines: readonly TermLine[];
  readonly shift: number;
  /** Log widths that add up: the common one, and the signal's own excess. */
  readonly widths: readonly number[];
  readonly phase: number;
  readonly couplings: readonly number[];
}

/** One nonlinear parameter with its start, its prior (mean, standard deviation) and its hard bounds. */
export interface Parameter {
  readonly kind: 'shift' | 'log-width' | 'phase' | 'coupling' | 'lorentz-share';
  readonly start: number;
  readonly mean: number;
  readonly sigma: number;
  readonly low: number;
  readonly high: number;
}

/** The points of a region and what they are compared with. */
export interface RegionWindow {
  /** Index of the first and behind the last spectrum point. */
  readonly from: number;
  readonly to: number;
  /** Hz of the first point on the region's own axis; falls by `stepHz` per point. */
  readonly firstHz: number;
  readonly stepHz: number;
  /** Seconds after which the decay was cut; absent: not known, or it died out. */
  readonly acquisitionS?: number;
  /** See `BinnedSpectrum`. */
  readonly blur: number;
  readonly rippleFactor: number;
  /** shape (to - from): data less what other regions explain. */
  readonly data: Float64Array;
  readonly noise: number;
  /** Whitening filter, entry 0 first: see `whiteningFilter`. */
  readonly filter: Float64Array;
  /** Autocorrelation of the noise after the filter; entry 0 is 1. */
  readonly filteredCorrelation: Float64Array;
  /** Standard uncertainty of the local baseline level, units of the data. */
  readonly baselineU: number;
  /** shape (to - from) or absent: factor below 1 where the line shape is known less well than the noise. */
  readonly trust?: Float64Array;
}

export interface RegionModel {
  readonly terms: readonly Term[];
  readonly parameters: readonly Parameter[];
  /** Index of the Lorentz share among the parameters. */
  readonly lorentzShare: number;
  /** The shape that every line of the region is drawn with. */
  readonly components: readonly LineComponent[];
}

/** Result of `fitRegion`. Linear components: one area per term, then baseline level and slope. */
export interface RegionFit {
  readonly model: RegionModel;
  readonly areas: Float64Array;
  readonly level: number;
  readonly slopePerHz: number;
  readonly values: Float64Array;
  /** Covariance of (areas, level, slope x half width, free parameters), row-major, with correlated noise; worked out when asked. */
  readonly covarianceOf: () => Float64Array;
  readonly size: number;
  /** Sum of squares of the whitened residual, in units of the noise; without the priors. */
  readonly chiSquare: number;
  /** With the priors. */
  readonly cost: number;
  readonly pointCount: number;
  /** Whitened columns of (areas, level, slope, free parameters) in units of the noise, their residual, and the inverse of the normal matrix. */
  readonly columns: readonly Float64Array[];
  readonly whitened: Float64Array;
  readonly inverse: Float64Array;
  /** Indices of the free parameters, in the order of the columns behind level and slope. */
  readonly free: readonly number[];
  /** shape (to - from): data less model. */
  readonly residual: Float64Array;
  /** shape (to - from): the whole model with its baseline. */
  readonly fit: Float64Array;
}
