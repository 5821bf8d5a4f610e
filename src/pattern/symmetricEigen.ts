import { invariant } from '../base/result.js';

/** Eigenvalues ascending; row k of `vectors` (n x n, row by row) is the eigenvector of `values[k]`. */
export interface SymmetricEigen {
  readonly values: Float64Array;
  readonly vectors: Float64Array;
}

const turnsMax = 60;

/**
 * Eigen-decomposition of a small real symmetric matrix: Householder tridiagonalisation, then QL steps with implicit shifts.
 *
 * @param matrix  shape (n x n) row by row, symmetric; it is not changed
 * @param n       rows
 * @returns eigenvalues ascending with orthonormal eigenvectors as rows
 * @source  H. Bowdler, R. S. Martin, C. Reinsch, J. H. Wilkinson, Numer. Math. 11 (1968) 293-306 (tred2, tql2; from memory);
 *          checked against A v = lambda v
 */
export function symmetricEigen(matrix: Float64Array, n: number): SymmetricEigen {
  const v = matrix.slice();
  const d = new Float64Array(n);
  const e = new Float64Array(n);
  tridiagonalise(v, d, e, n);
  accumulate(v, d, e, n);
  const vectors = transposed(v, n);
  diagonalise(vectors, d, e, n);
  return inOrder(vectors, d, n);
}

/** After it `v` holds the Householder vectors, `d` the work row and `e` the off-diagonal. */
function tridiagonalise(v: Float64Array, d: Float64Array, e: Float64Array, n: number): void {
  for (let j = 0; j < n; j++) d[j] = v[(n - 1) * n + j]!;
  for (let i = n - 1; i > 0; i--) {
    let scale = 0;
    for (let k = 0; k < i; k++) scale += Math.abs(d[k]!);
    if (scale === 0) {
      e[i] = d[i - 1]!;
      for (let j = 0; j < i; j++) {
        d[j] = v[(i - 1) * n + j]!;
        v[i * n + j] = 0;
        v[j * n + i] = 0;
      }
      d[i] = 0;
      continue;
    }
    d[i] = reflect(v, d, e, n, i, scale);
  }
}

function reflect(v: Float64Array, d: Float64Array, e: Float64Array, n: number, i: number, scale: number): number {
  let h = 0;
  for (let k = 0; k < i; k++) {
    d[k]! /= scale;
    h += d[k]! * d[k]!;
  }
  let f = d[i - 1]!;
  let g = f > 0 ? -Math.sqrt(h) : Math.sqrt(h);
  e[i] = scale * g;
  h -= f * g;
  d[i - 1] = f - g;
  e.fill(0, 0, i);
  for (let j = 0; j < i; j++) {
    f = d[j]!;
    v[j * n + i] = f;
    g = e[j]! + v[j * n + j]! * f;
    for (let k = j + 1; k < i; k++) {
      g += v[k * n + j]! * d[k]!;
      e[k]! += v[k * n + j]! * f;
    }
    e[j] = g;
  }
  f = 0;
  for (let j = 0; j < i; j++) {
    e[j]! /= h;
    f += e[j]! * d[j]!;
  }
  const half = f / (h + h);
  for (let j = 0; j < i; j++) e[j]! -= half * d[j]!;
  for (let j = 0; j < i; j++) {
    f = d[j]!;
    g = e[j]!;
    for (let k = j; k < i; k++) v[k * n + j]! -= f * e[k]! + g * d[k]!;
    d[j] = v[(i - 1) * n + j]!;
    v[i * n + j] = 0;
  }
  return h;
}

/** Multiplies the reflections out: `v` becomes the orthogonal matrix, `d` the diagonal. */
function accumulate(v: Float64Array, d: Float64Array, e: Float64Array, n: number): void {
  const last = (n - 1) * n;
  for (let i = 0; i < n - 1; i++) {
    v[last + i] = v[i * n + i]!;
    v[i * n + i] = 1;
    const h = d[i + 1]!;
    if (h !== 0) {
      for (let k = 0; k <= i; k++) d[k] = v[k * n + i + 1]! / h;
      for (let j = 0; j <= i; j++) {
        let g = 0;
        for (let k = 0; k <= i; k++) g += v[k * n + i + 1]! * v[k * n + j]!;
        for (let k = 0; k <= i; k++) v[k * n + j]! -= g * d[k]!;
      }
    }
    for (let k = 0; k <= i; k++) v[k * n + i + 1] = 0;
  }
  for (let j = 0; j < n; j++) {
    d[j] = v[last + j]!;
    v[last + j] = 0;
  }
  v[last + n - 1] = 1;
  e.copyWithin(0, 1);
  e[n - 1] = 0;
}

/** QL iterations on the tridiagonal matrix; the rotations act on the rows of `vectors`. */
function diagonalise(vectors: Float64Array, d: Float64Array, e: Float64Array, n: number): void {
  let shift = 0;
  let largest = 0;
  for (let l = 0; l < n; l++) {
    largest = Math.max(largest, Math.abs(d[l]!) + Math.abs(e[l]!));
    let m = l;
    while (m < n - 1 && Math.abs(e[m]!) > Number.EPSILON * largest) m++;
    for (let turn = 0; m > l && (turn === 0 || Math.abs(e[l]!) > Number.EPSILON * largest); turn++) {
      invariant(turn < turnsMax, 'the eigenvalue iteration must converge');
      const g = d[l]!;
      const p = (d[l + 1]! - g) / (2 * e[l]!);
      const r = p < 0 ? -Math.hypot(p, 1) : Math.hypot(p, 1);
      d[l] = e[l]! / (p + r);
      d[l + 1] = e[l]! * (p + r);
      const h = g - d[l]!;
      for (let i = l + 2; i < n; i++) d[i]! -= h;
      shift += h;
      sweep(vectors, d, e, n, l, m);
    }
    d[l]! += shift;
    e[l] = 0;
  }
}

function sweep(vectors: Float64Array, d: Float64Array, e: Float64Array, n: number, l: number, m: number): void {
  const below = d[l + 1]!;
  const offDiagonal = e[l + 1]!;
  let p = d[m]!;
  let c = 1;
  let c2 = 1;
  let c3 = 1;
  let s = 0;
  let s2 = 0;
  for (let i = m - 1; i >= l; i--) {
    c3 = c2;
    c2 = c;
    s2 = s;
    const g = c * e[i]!;
    const h = c * p;
    const r = Math.hypot(p, e[i]!);
    e[i + 1] = s * r;
    s = e[i]! / r;
    c = p / r;
    p = c * d[i]! - s * g;
    d[i + 1] = h + s * (c * g + s * d[i]!);
    for (let k = 0; k < n; k++) {
      const upper = vectors[(i + 1) * n + k]!;
      const lower = vectors[i * n + k]!;
      vectors[(i + 1) * n + k] = s * lower + c * upper;
      vectors[i * n + k] = c * lower - s * upper;
    }
  }
  p = (-s * s2 * c3 * offDiagonal * e[l]!) / below;
  e[l] = s * p;
  d[l] = c * p;
}

function transposed(v: Float64Array, n: number): Float64Array {
  const turned = new Float64Array(n * n);
  for (let i = 0; i < n; i++) for (let j = 0; j < n; j++) turned[j * n + i] = v[i * n + j]!;
  return turned;
}

function inOrder(vectors: Float64Array, d: Float64Array, n: number): SymmetricEigen {
  const order = Array.from({ length: n }, (_, index) => index).sort((a, b) => d[a]! - d[b]! || a - b);
  const sorted = new Float64Array(n * n);
  for (const [row, from] of order.entries()) sorted.set(vectors.subarray(from * n, from * n + n), row * n);
  return { values: Float64Array.from(order, (index) => d[index]!), vectors: sorted };
}
