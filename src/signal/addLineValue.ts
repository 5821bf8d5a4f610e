import { rippleOf, type TermAxis } from './addTerm.js';

const gaussHeight = 2 * Math.sqrt(Math.LN2 / Math.PI);

export interface PlacedLine {
  readonly shiftHz: number;
  readonly area: number;
  readonly widthHz: number;
  readonly phase: number;
  readonly lorentzShare: number;
}

/**
 * Adds one line, without derivatives: for tails that reach into other windows.
 *
 * @param sum shape (points), added to in place
 * @source  as `addTerm`
 */
export function addLineValue(sum: Float64Array, line: PlacedLine, axis: TermAxis): void {
  const { area, widthHz, lorentzShare } = line;
  const cosine = Math.cos(line.phase);
  const sine = Math.sin(line.phase);
  const decay = Math.PI * widthHz;
  const blur = axis.blur ?? 0;
  const ripple = rippleOf(line.shiftHz, widthHz, axis);
  let { cutRe, cutIm } = ripple;
  for (let i = 0; i < sum.length; i += 1) {
    const offset = 2 * Math.PI * (axis.firstHz - i * axis.stepHz - line.shiftHz);
    const norm = 2 / (decay * decay + offset * offset);
    let pRe = decay * norm;
    let pIm = -offset * norm;
    if (blur > 0) {
      const bRe = -blur * (pRe * pRe - pIm * pIm);
      const bIm = -2 * blur * pRe * pIm;
      const blurredRe = pRe * (1 + bRe) - pIm * bIm;
      pIm = pIm * (1 + bRe) + pRe * bIm;
      pRe = blurredRe;
    }
    let absorption = pRe;
    let dispersion = pIm;
    if (ripple.seconds > 0) {
      absorption = pRe * (1 - cutRe) + pIm * cutIm;
      dispersion = pIm * (1 - cutRe) - pRe * cutIm;
      const turned = cutRe * ripple.turnRe - cutIm * ripple.turnIm;
      cutIm = cutRe * ripple.turnIm + cutIm * ripple.turnRe;
      cutRe = turned;
    }
    if (lorentzShare < 1) {
      const u = offset / decay;
      const gauss = u * u < 60 ? (gaussHeight / widthHz) * Math.exp(-Math.LN2 * u * u) : 0;
      absorption = lorentzShare * absorption + (1 - lorentzShare) * gauss;
    }
    sum[i] = sum[i]! + area * (cosine * absorption - sine * dispersion);
  }
}
