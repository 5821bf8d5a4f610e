import type { Term } from './regionModel.js';

const gaussHeight = 2 * Math.sqrt(Math.LN2 / Math.PI);
const lorentzHeight = 2 / Math.PI;

/** Columns that `addTerm` fills, each of shape (points): the unit-area shape and its derivatives. */
export interface TermColumns {
  readonly value: Float64Array;
  readonly byShift: Float64Array;
  readonly byLogWidth: Float64Array;
  readonly byPhase: Float64Array;
  readonly byLorentzShare: Float64Array;
  /** One per coupling of the term. */
  readonly byCoupling: readonly Float64Array[];
}

export interface TermState {
  readonly shiftHz: number;
  readonly widthHz: number;
  readonly phase: number;
  readonly lorentzShare: number;
  /** Whether the Lorentz share is being fitted, so that its derivative is needed even at 1. */
  readonly isShareFree: boolean;
  /** Change of each coupling from its start, Hz. */
  readonly couplings: readonly number[];
}

/** Empty columns for a term. */
export function termColumns(points: number, couplings: number): TermColumns {
  const column = () => new Float64Array(points);
  return {
    value: column(),
    byShift: column(),
    byLogWidth: column(),
    byPhase: column(),
    byLorentzShare: column(),
    byCoupling: Array.from({ length: couplings }, column),
  };
}

/**
 * Writes a pattern of unit-area pseudo-Voigt lines and its analytic derivatives.
 *
 * Shape: cos(phase) x [s L + (1 - s) G] + sin(phase) x D, with G and L of equal full width and D the Lorentzian's dispersive
 * partner; a small share of dispersion stands for what the phase correction left.
 *
 * @param firstHz Hz of the first point; falls by `stepHz` per point
 * @param columns overwritten
 * @source  Lorentzian, Gaussian and their derivatives (textbook, checked against finite differences in the tests)
 */
export function addTerm(term: Term, state: TermState, firstHz: number, stepHz: number, columns: TermColumns): void {
  const { value, byShift, byLogWidth, byPhase, byLorentzShare, byCoupling } = columns;
  const points = value.length;
  for (const column of [value, byShift, byLogWidth, byPhase, byLorentzShare, ...byCoupling]) column.fill(0);
  const { widthHz, lorentzShare } = state;
  const cosine = Math.cos(state.phase);
  const sine = Math.sin(state.phase);
  const perWidth = 2 / widthHz;
  const hasGauss = lorentzShare < 1 || state.isShareFree;
  const lineShift = new Float64Array(points);
  for (const { offsetHz, share, perCoupling } of term.lines) {
    let place = state.shiftHz + offsetHz;
    for (let k = 0; k < perCoupling.length; k += 1) place += perCoupling[k]! * state.couplings[k]!;
    const scale = share / widthHz;
    for (let i = 0; i < points; i += 1) {
      const u = (firstHz - i * stepHz - place) * perWidth;
      const u2 = u * u;
      const q = 1 / (1 + u2);
      const lorentz = lorentzHeight * q;
      const dispersion = lorentz * u;
      const slope = lorentz * q;
      // Lorentzian: value, d/dshift in units of perWidth, d/dlog width.
      let absorption = lorentz;
      let absorptionShift = 2 * u * slope;
      let absorptionWidth = (u2 - 1) * slope;
      if (hasGauss) {
        const gauss = u2 < 60 ? gaussHeight * Math.exp(-Math.LN2 * u2) : 0;
        byLorentzShare[i] = byLorentzShare[i]! + scale * cosine * (lorentz - gauss);
        absorption = lorentzShare * absorption + (1 - lorentzShare) * gauss;
        absorptionShift = lorentzShare * absorptionShift + (1 - lorentzShare) * gauss * 2 * Math.LN2 * u;
        absorptionWidth = lorentzShare * absorptionWidth + (1 - lorentzShare) * gauss * (2 * Math.LN2 * u2 - 1);
      }
      value[i] = value[i]! + scale * (cosine * absorption + sine * dispersion);
      lineShift[i] = scale * perWidth * (cosine * absorptionShift + sine * (u2 - 1) * slope);
      byLogWidth[i] = byLogWidth[i]! + scale * (cosine * absorptionWidth - sine * 2 * u * slope);
      byPhase[i] = byPhase[i]! + scale * (cosine * dispersion - sine * absorption);
    }
    addScaled(byShift, lineShift, 1);
    for (let k = 0; k < perCoupling.length; k += 1) addScaled(byCoupling[k]!, lineShift, perCoupling[k]!);
  }
}

function addScaled(target: Float64Array, source: Float64Array, factor: number): void {
  if (factor === 0) return;
  for (let i = 0; i < target.length; i += 1) target[i] = target[i]! + factor * source[i]!;
}
