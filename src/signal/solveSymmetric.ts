/**
 * Cholesky factor of a symmetric positive definite matrix, with a tiny ridge where rounding made it indefinite.
 *
 * @param matrix shape (n x n), row-major
 * @param n      size
 * @returns lower factor, shape (n x n), row-major
 * @source  Golub, Van Loan, Matrix Computations (Cholesky, textbook form)
 */
export function choleskyFactor(matrix: Float64Array, n: number): Float64Array {
  const lower = new Float64Array(n * n);
  for (let j = 0; j < n; j += 1) {
    const diagonal = matrix[j * n + j]!;
    let sum = diagonal;
    for (let k = 0; k < j; k += 1) sum -= lower[j * n + k]! ** 2;
    const pivot = Math.sqrt(Math.max(sum, 1e-13 * Math.abs(diagonal), 1e-300));
    lower[j * n + j] = pivot;
    for (let i = j + 1; i < n; i += 1) {
      let value = matrix[i * n + j]!;
      for (let k = 0; k < j; k += 1) value -= lower[i * n + k]! * lower[j * n + k]!;
      lower[i * n + j] = value / pivot;
    }
  }
  return lower;
}

/** Solves L L^T x = b; shape (n). */
export function choleskySolve(lower: Float64Array, n: number, right: Float64Array): Float64Array {
  const x = Float64Array.from(right.subarray(0, n));
  for (let i = 0; i < n; i += 1) {
    let value = x[i]!;
    for (let k = 0; k < i; k += 1) value -= lower[i * n + k]! * x[k]!;
    x[i] = value / lower[i * n + i]!;
  }
  for (let i = n - 1; i >= 0; i -= 1) {
    let value = x[i]!;
    for (let k = i + 1; k < n; k += 1) value -= lower[k * n + i]! * x[k]!;
    x[i] = value / lower[i * n + i]!;
  }
  return x;
}

/** Inverse of L L^T, shape (n x n), row-major. */
export function choleskyInverse(lower: Float64Array, n: number): Float64Array {
  const inverse = new Float64Array(n * n);
  const unit = new Float64Array(n);
  for (let j = 0; j < n; j += 1) {
    unit.fill(0);
    unit[j] = 1;
    const column = choleskySolve(lower, n, unit);
    for (let i = 0; i < n; i += 1) inverse[i * n + j] = column[i]!;
  }
  return inverse;
}
