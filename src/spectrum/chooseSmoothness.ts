import { medianOf } from './medianOf.js';
import { smoothBanded } from './smoothBanded.js';

export interface Smoothed {
  /** shape (m) */
  readonly levels: Float64Array;
  readonly bends: number;
  /** Smoothness used; 0 when only a constant could be had. */
  readonly lambda: number;
  /** Effective number of parameters. */
  readonly freedom: number;
}

/** Bends from end to end that a baseline may have, from a straight line to what is still no signal. */
const bendChoices = [0.5, 1.5, 3, 5, 8, 12, 18, 26];

/**
 * Smooths bin means with as many bends as generalised cross-validation asks for, bins that stand out counting little.
 *
 * @param means   shape (m)
 * @param weights shape (m): free points in each bin
 * @param noise   rms of one point
 * @param independence independent points per point
 * @returns levels at bin centres
 * @source Craven, Wahba, Numer. Math. 1979, 31, 377; Tukey's biweight, Beaton, Tukey, Technometrics 1974, 16, 147
 */
export function chooseSmoothness(means: Float64Array, weights: Float64Array, noise: number, independence: number): Smoothed {
  const typical = Math.max(1, medianOf(weights.filter((weight) => weight > 0)));
  const used = weights.filter((weight) => weight > 0.1 * typical).length;
  let best: (Smoothed & { cost: number }) | undefined;
  for (const bends of bendChoices) {
    const lambda = typical * (means.length / (2 * Math.PI * bends)) ** 4;
    const robust = robustWeights(means, weights, smoothBanded(means, weights, lambda), noise, independence);
    const levels = smoothBanded(means, robust, lambda);
    const freedom = 2 + freedomOf(bends) * Math.min(1, used / means.length + 0.1);
    if (freedom > 0.4 * used) break;
    let [sum, total] = [0, 0];
    for (let k = 0; k < means.length; k += 1) {
      sum += robust[k]! * (means[k]! - levels[k]!) ** 2;
      total += robust[k]!;
    }
    const cost = sum / total / (1 - (1.6 * freedom) / used) ** 2;
    if (!best || cost < best.cost) best = { levels, bends, lambda, freedom, cost };
  }
  if (best) return best;
  const middle = medianOf(means.filter((_, k) => weights[k]! > 0));
  return { levels: new Float64Array(means.length).fill(Number.isNaN(middle) ? 0 : middle), bends: 0, lambda: 0, freedom: 1 };
}

/** Sum over frequencies k of 1 / (1 + (k / (2 bends))^4), k half-periods from end to end. */
function freedomOf(bends: number): number {
  let sum = 0;
  for (let k = 1; k < 400; k += 1) sum += 1 / (1 + (k / (2 * bends)) ** 4);
  return sum;
}

function robustWeights(
  means: Float64Array,
  weights: Float64Array,
  levels: Float64Array,
  noise: number,
  independence: number,
): Float64Array {
  const scaled = means.map((mean, k) => ((mean - levels[k]!) / noise) * Math.sqrt(weights[k]! * independence));
  const spread = Math.max(1, 1.4826 * medianOf(scaled.filter((_, k) => weights[k]! > 0).map(Math.abs)));
  return weights.map((weight, k) => {
    const z = scaled[k]! / (5 * spread);
    return Math.abs(z) < 1 ? weight * (1 - z * z) ** 2 : 0;
  });
}
