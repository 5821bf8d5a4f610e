import type { LocalPhase } from './localPhases.js';

/** A phase over the whole spectrum: zero order at its centre, first order from end to end. */
export interface PhaseFit {
  readonly zeroRad: number;
  readonly firstRad: number;
  /** Weighted rms of what the straight line leaves, radians. */
  readonly restRad: number;
  readonly groups: number;
}

/**
 * Lays a straight line through the local phases, which are known but for whole turns.
 *
 * The branch is found by scanning the first order for the best agreement on the circle, the smallest first order winning among
 * equals; then the line is refined by robust weighted least squares.
 *
 * @param phases      local phases with uncertainty
 * @param pointCount  n of the spectrum
 * @param firstRadMax largest first order to consider, radians from end to end
 * @returns zero and first order; both 0 without phases
 * @source Huber weights: Huber, Ann. Math. Stat. 1964, 35, 73
 */
export function fitPhase(phases: readonly LocalPhase[], pointCount: number, firstRadMax: number): PhaseFit {
  if (phases.length === 0) return { zeroRad: 0, firstRad: 0, restRad: Number.NaN, groups: 0 };
  const data = phases.map(({ index, phaseRad, u }) => ({ x: index / pointCount - 0.5, phaseRad, u: Math.max(u, 3e-3) }));
  if (data.length === 1) return { zeroRad: wrap(data[0]!.phaseRad), firstRad: 0, restRad: data[0]!.u, groups: 1 };
  const start = scan(data, firstRadMax);
  return refine(data, start);
}

type Datum = { readonly x: number; readonly phaseRad: number; readonly u: number };

function scan(data: readonly Datum[], firstRadMax: number): { zeroRad: number; firstRad: number } {
  const step = (2 * Math.PI) / 120;
  const count = Math.ceil(firstRadMax / step);
  const weights = data.map(({ u }) => 1 / (u * u + 0.02 ** 2));
  const total = weights.reduce((sum, value) => sum + value, 0);
  let best = { zeroRad: 0, firstRad: 0, score: Number.NEGATIVE_INFINITY };
  for (let k = -count; k <= count; k += 1) {
    const firstRad = k * step;
    let [re, im] = [0, 0];
    data.forEach(({ x, phaseRad }, index) => {
      re += weights[index]! * Math.cos(phaseRad - firstRad * x);
      im += weights[index]! * Math.sin(phaseRad - firstRad * x);
    });
    const score = Math.hypot(re, im) / total - 4e-4 * Math.abs(k);
    if (score > best.score) best = { zeroRad: Math.atan2(im, re), firstRad, score };
  }
  return best;
}

function refine(data: readonly Datum[], start: { zeroRad: number; firstRad: number }): PhaseFit {
  let { zeroRad, firstRad } = start;
  let restRad = 0;
  for (let turn = 0; turn < 12; turn += 1) {
    let [s, sx, sxx, sy, sxy, rest] = [0, 0, 0, 0, 0, 0];
    for (const { x, phaseRad, u } of data) {
      const residual = wrap(phaseRad - zeroRad - firstRad * x);
      const weight = (1 / (u * u)) * Math.min(1, (2.5 * u) / Math.max(Math.abs(residual), 1e-12));
      s += weight;
      sx += weight * x;
      sxx += weight * x * x;
      sy += weight * residual;
      sxy += weight * x * residual;
      rest += weight * residual * residual;
    }
    // A weak prior (one turn) keeps the slope finite when all groups lie close together.
    const prior = 1 / (2 * Math.PI) ** 2;
    const determinant = s * (sxx + prior) - sx * sx;
    const dZero = ((sxx + prior) * sy - sx * sxy) / determinant;
    const dFirst = (s * sxy - sx * sy) / determinant;
    zeroRad += dZero;
    firstRad += dFirst;
    restRad = Math.sqrt(rest / s);
    if (Math.abs(dZero) + Math.abs(dFirst) < 1e-6) break;
  }
  return { zeroRad: wrap(zeroRad), firstRad, restRad, groups: data.length };
}

/** Into (-pi, pi]. */
export function wrap(angleRad: number): number {
  return angleRad - 2 * Math.PI * Math.round(angleRad / (2 * Math.PI));
}
