/**
 * Second-difference penalised smoother: minimises sum w (y - v)^2 + lambda sum (second difference of v)^2.
 *
 * @param y       shape (m)
 * @param weights shape (m), >= 0; at least two above zero
 * @param lambda  smoothness, > 0
 * @returns v, shape (m)
 * @source Whittaker, Proc. Edinb. Math. Soc. 1923, 41, 63; Eilers, Anal. Chem. 2003, 75, 3631; banded Cholesky (L D L^T);
 *         checked against scipy.sparse
 */
export function smoothBanded(y: Float64Array, weights: Float64Array, lambda: number): Float64Array {
  const m = y.length;
  if (m < 3) return Float64Array.from(y);
  const d = new Float64Array(m);
  const e = new Float64Array(m);
  const f = new Float64Array(m);
  const z = new Float64Array(m);
  for (let i = 0; i < m; i += 1) {
    const edge = Math.min(i, m - 1 - i);
    const diagonal = weights[i]! + 1e-12 + lambda * (edge === 0 ? 1 : edge === 1 ? 5 : 6);
    const first = i < m - 1 ? lambda * (i === 0 || i === m - 2 ? -2 : -4) : 0;
    const second = i < m - 2 ? lambda : 0;
    const [d1, d2] = [i > 0 ? d[i - 1]! : 0, i > 1 ? d[i - 2]! : 0];
    const [e1, f1, f2] = [i > 0 ? e[i - 1]! : 0, i > 0 ? f[i - 1]! : 0, i > 1 ? f[i - 2]! : 0];
    d[i] = diagonal - d1 * e1 * e1 - d2 * f2 * f2;
    e[i] = (first - d1 * e1 * f1) / d[i]!;
    f[i] = second / d[i]!;
    z[i] = weights[i]! * y[i]! - (i > 0 ? e1 * z[i - 1]! : 0) - (i > 1 ? f2 * z[i - 2]! : 0);
  }
  const v = new Float64Array(m);
  for (let i = m - 1; i >= 0; i -= 1) {
    v[i] = z[i]! / d[i]! - (i < m - 1 ? e[i]! * v[i + 1]! : 0) - (i < m - 2 ? f[i]! * v[i + 2]! : 0);
  }
  return v;
}
