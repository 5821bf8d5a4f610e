import type { Term } from './regionModel.js';

const gaussHeight = 2 * Math.sqrt(Math.LN2 / Math.PI);
/** Below this the ripple of a cut decay cannot be seen at any signal-to-noise. */
const rippleMin = 1e-7;

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

/** Where the points of a column lie. */
export interface TermAxis {
  /** Hz of the first point; falls by `stepHz` per point. */
  readonly firstHz: number;
  readonly stepHz: number;
  /** Seconds after which the decay was cut; absent: it died out. */
  readonly acquisitionS?: number;
  /** See `BinnedSpectrum`; absent: points are not means. */
  readonly blur?: number;
  readonly rippleFactor?: number;
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
 * Writes a pattern of unit-area lines and its analytic derivatives.
 *
 * A line is the transform of a decay cut at T: S = 2 (1 - exp(-z T)) / z with z = pi W + 2 pi i (x - f); its real part is a
 * Lorentzian of full width W with the ripple of the cut. The value is Re(exp(i phase) S), with a Gaussian of equal width mixed
 * in by (1 - lorentzShare); a small phase stands for what the phase correction left.
 *
 * @param axis    points, Hz
 * @param columns overwritten
 * @source  transform of an exponential decay (textbook); derivatives checked against finite differences in the tests
 */
export function addTerm(term: Term, state: TermState, axis: TermAxis, columns: TermColumns): void {
  const { value, byShift, byLogWidth, byPhase, byLorentzShare, byCoupling } = columns;
  for (const column of [value, byShift, byLogWidth, byPhase, byLorentzShare, ...byCoupling]) column.fill(0);
  const lineShift = new Float64Array(value.length);
  for (const { offsetHz, share, perCoupling, extraWidthHz = 0 } of term.lines) {
    let place = state.shiftHz + offsetHz;
    for (let k = 0; k < perCoupling.length; k += 1) place += perCoupling[k]! * state.couplings[k]!;
    addLine({ place, share, extraWidthHz }, state, axis, columns, lineShift);
    addScaled(byShift, lineShift, 1);
    for (let k = 0; k < perCoupling.length; k += 1) addScaled(byCoupling[k]!, lineShift, perCoupling[k]!);
  }
}

function addLine(
  { place, share, extraWidthHz }: { readonly place: number; readonly share: number; readonly extraWidthHz: number },
  state: TermState,
  axis: TermAxis,
  columns: TermColumns,
  lineShift: Float64Array,
): void {
  const { value, byLogWidth, byPhase, byLorentzShare } = columns;
  const { lorentzShare } = state;
  const widthHz = state.widthHz + extraWidthHz;
  // d(width + extra)/dlog(width) is the width alone.
  const perLogWidth = state.widthHz / widthHz;
  const cosine = Math.cos(state.phase);
  const sine = Math.sin(state.phase);
  const decay = Math.PI * widthHz;
  const ripple = rippleOf(place, widthHz, axis);
  let { cutRe, cutIm } = ripple;
  const blur = axis.blur ?? 0;
  const hasGauss = lorentzShare < 1 || state.isShareFree;
  const points = value.length;
  for (let i = 0; i < points; i += 1) {
    const offset = 2 * Math.PI * (axis.firstHz - i * axis.stepHz - place);
    const norm = 2 / (decay * decay + offset * offset);
    // P = 2 / z.
    let pRe = decay * norm;
    let pIm = -offset * norm;
    // dP/dz = -P^2 / 2.
    let dRe = -(pRe * pRe - pIm * pIm) / 2;
    let dIm = -pRe * pIm;
    if (blur > 0) {
      // The mean over a bin: P (1 - b P^2), dP/dz (1 - 3 b P^2), with P^2 = -2 dP/dz.
      const bRe = 2 * blur * dRe;
      const bIm = 2 * blur * dIm;
      const blurredRe = pRe * (1 + bRe) - pIm * bIm;
      pIm = pIm * (1 + bRe) + pRe * bIm;
      pRe = blurredRe;
      const slopeRe = dRe * (1 + 3 * bRe) - 3 * dIm * bIm;
      dIm = dIm * (1 + 3 * bRe) + 3 * dRe * bIm;
      dRe = slopeRe;
    }
    // S = P (1 - Q); dS/dz = dP/dz (1 - Q) + P T Q.
    const sRe = pRe * (1 - cutRe) + pIm * cutIm;
    const sIm = pIm * (1 - cutRe) - pRe * cutIm;
    let zRe = dRe * (1 - cutRe) + dIm * cutIm;
    let zIm = dIm * (1 - cutRe) - dRe * cutIm;
    if (ripple.seconds > 0) {
      zRe += ripple.seconds * (pRe * cutRe - pIm * cutIm);
      zIm += ripple.seconds * (pRe * cutIm + pIm * cutRe);
      const turned = cutRe * ripple.turnRe - cutIm * ripple.turnIm;
      cutIm = cutRe * ripple.turnIm + cutIm * ripple.turnRe;
      cutRe = turned;
    }
    let absorption = sRe;
    let absorptionShift = 2 * Math.PI * zIm;
    let absorptionWidth = decay * zRe;
    if (hasGauss) {
      const u = offset / decay;
      const gauss = u * u < 60 ? (gaussHeight / widthHz) * Math.exp(-Math.LN2 * u * u) : 0;
      byLorentzShare[i] = byLorentzShare[i]! + share * cosine * (sRe - gauss);
      absorption = lorentzShare * sRe + (1 - lorentzShare) * gauss;
      absorptionShift = lorentzShare * absorptionShift + ((1 - lorentzShare) * gauss * 4 * Math.LN2 * u) / widthHz;
      absorptionWidth = lorentzShare * absorptionWidth + (1 - lorentzShare) * gauss * (2 * Math.LN2 * u * u - 1);
    }
    value[i] = value[i]! + share * (cosine * absorption - sine * sIm);
    // dS/df = -2 pi i dS/dz.
    lineShift[i] = share * (cosine * absorptionShift + sine * 2 * Math.PI * zRe);
    byLogWidth[i] = byLogWidth[i]! + share * perLogWidth * (cosine * absorptionWidth - sine * decay * zIm);
    byPhase[i] = byPhase[i]! - share * (sine * absorption + cosine * sIm);
  }
}

/** exp(-z T) at the first point, and its turn from one point to the next. */
export function rippleOf(place: number, widthHz: number, axis: TermAxis) {
  const seconds = axis.acquisitionS ?? 0;
  const size = seconds > 0 ? Math.exp(-Math.PI * widthHz * seconds) * (axis.rippleFactor ?? 1) : 0;
  if (Math.abs(size) < rippleMin) return { seconds: 0, cutRe: 0, cutIm: 0, turnRe: 1, turnIm: 0 };
  const angle = -2 * Math.PI * (axis.firstHz - place) * seconds;
  const turn = 2 * Math.PI * axis.stepHz * seconds;
  return {
    seconds,
    cutRe: size * Math.cos(angle),
    cutIm: size * Math.sin(angle),
    turnRe: Math.cos(turn),
    turnIm: Math.sin(turn),
  };
}

function addScaled(target: Float64Array, source: Float64Array, factor: number): void {
  if (factor === 0) return;
  for (let i = 0; i < target.length; i += 1) target[i] = target[i]! + factor * source[i]!;
}
