/**
 * Solves a symmetric positive definite system for several right-hand sides by the Cholesky factor.
 *
 * @param lower  shape (size x size), row by row; only the lower triangle is read
 * @param size   number of unknowns
 * @param rights right-hand sides, shape (size) each
 * @returns one solution a right-hand side; undefined when the matrix is not definite
 * @source textbook Cholesky; a ridge of 1e-10 of each diagonal element keeps near-copies apart
 */
export function choleskySolve(lower: Float64Array, size: number, rights: readonly Float64Array[]): Float64Array[] | undefined {
  const factor = Float64Array.from(lower);
  for (let a = 0; a < size; a += 1) {
    for (let b = 0; b <= a; b += 1) {
      let sum = lower[a * size + b]!;
      if (a === b) sum += 1e-10 * sum + 1e-300;
      for (let k = 0; k < b; k += 1) sum -= factor[a * size + k]! * factor[b * size + k]!;
      if (a !== b) factor[a * size + b] = sum / factor[b * size + b]!;
      else if (sum > 0) factor[a * size + a] = Math.sqrt(sum);
      else return undefined;
    }
  }
  return rights.map((right) => backSolve(factor, size, right));
}

function backSolve(factor: Float64Array, size: number, right: Float64Array): Float64Array {
  const x = Float64Array.from(right);
  for (let a = 0; a < size; a += 1) {
    for (let k = 0; k < a; k += 1) x[a] = x[a]! - factor[a * size + k]! * x[k]!;
    x[a] = x[a]! / factor[a * size + a]!;
  }
  for (let a = size - 1; a >= 0; a -= 1) {
    for (let k = a + 1; k < size; k += 1) x[a] = x[a]! - factor[k * size + a]! * x[k]!;
    x[a] = x[a]! / factor[a * size + a]!;
  }
  return x;
}
