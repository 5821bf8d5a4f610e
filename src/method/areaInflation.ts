import { inverse, Matrix } from 'ml-matrix';
import type { PlacedPattern } from './overlapShare.js';

/** Above it the areas cannot be told apart by any fit that a spectrum would bear. */
export const inflationMax = 1e4;

/**
 * How much larger the standard uncertainties of areas become because signals are fitted together: from the Fisher information
 * of areas and shifts in white noise, jointly and for each signal alone, line width known.
 *
 * @param patterns  signals of one region, shape (n)
 * @param widthHz   full width at half height of every line, Hz
 * @returns shape (n), at least 1; `Infinity` when areas cannot be told apart
 * @source  Cramer-Rao bound; the inner product of two Lorentzians of width w is a Lorentzian of width 2 w, so all elements are
 *          sums over pairs of lines in closed form (derived; checked against a numeric grid)
 */
export function areaInflation(patterns: readonly PlacedPattern[], widthHz: number): number[] {
  const n = patterns.length;
  // Parameters: areas, then shifts times area, so that the information does not depend on the amounts.
  const information = Matrix.zeros(2 * n, 2 * n);
  for (let i = 0; i < n; i++) {
    for (let j = 0; j < n; j++) {
      const { both, slope, curve } = products(patterns[i]!, patterns[j]!, widthHz);
      information.set(i, j, both);
      information.set(n + i, j, slope);
      information.set(j, n + i, slope);
      information.set(n + i, n + j, -curve);
    }
  }
  const alone = patterns.map((_, i) => {
    const [aa, as, ss] = [information.get(i, i), information.get(i, n + i), information.get(n + i, n + i)];
    return ss / (aa * ss - as * as);
  });
  const scaled = scale(information);
  let joint: Matrix;
  try {
    joint = inverse(scaled.matrix);
  } catch {
    // Singular: two signals are one curve.
    return alone.map(() => Number.POSITIVE_INFINITY);
  }
  return alone.map((variance, i) => {
    const ratio = Math.sqrt((joint.get(i, i) * scaled.factors[i]! ** 2) / variance);
    return Number.isFinite(ratio) && ratio < inflationMax ? Math.max(1, ratio) : Number.POSITIVE_INFINITY;
  });
}

function scale(matrix: Matrix): { readonly matrix: Matrix; readonly factors: readonly number[] } {
  const factors = Array.from({ length: matrix.rows }, (_, i) => 1 / Math.sqrt(matrix.get(i, i)));
  const scaled = matrix.clone();
  for (let i = 0; i < matrix.rows; i++)
    for (let j = 0; j < matrix.rows; j++) scaled.set(i, j, matrix.get(i, j) * factors[i]! * factors[j]!);
  return { matrix: scaled, factors };
}

/** Inner product of two curves, of the shift derivative of the first with the second, and minus that of both derivatives. */
function products(a: PlacedPattern, b: PlacedPattern, widthHz: number) {
  const w2 = widthHz * widthHz;
  let both = 0;
  let slope = 0;
  let curve = 0;
  for (const left of a.lines) {
    for (const right of b.lines) {
      const d = a.centreHz + left.offsetHz - b.centreHz - right.offsetHz;
      const weight = left.share * right.share;
      const q = d * d + w2;
      both += weight / q;
      slope -= (weight * 2 * d) / (q * q);
      curve += weight * ((8 * d * d) / (q * q * q) - 2 / (q * q));
    }
  }
  const factor = widthHz / Math.PI;
  return { both: both * factor, slope: slope * factor, curve: curve * factor };
}
