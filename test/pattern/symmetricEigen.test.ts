import { describe, expect, it } from 'vitest';
import { symmetricEigen } from '../../src/pattern/symmetricEigen.js';
import { makeRandom } from '../../src/simulate/random.js';

/** Largest element of A v - lambda v, and of V V' - 1. */
function defects(matrix: Float64Array, n: number): readonly [number, number] {
  const { values, vectors } = symmetricEigen(matrix, n);
  let residual = 0;
  let angle = 0;
  for (let k = 0; k < n; k++) {
    for (let i = 0; i < n; i++) {
      let sum = -values[k]! * vectors[k * n + i]!;
      let dot = i === k ? -1 : 0;
      for (let j = 0; j < n; j++) {
        sum += matrix[i * n + j]! * vectors[k * n + j]!;
        dot += vectors[k * n + j]! * vectors[i * n + j]!;
      }
      residual = Math.max(residual, Math.abs(sum));
      angle = Math.max(angle, Math.abs(dot));
    }
  }
  return [residual, angle];
}

function symmetric(n: number, fill: (i: number, j: number) => number): Float64Array {
  const matrix = new Float64Array(n * n);
  for (let i = 0; i < n; i++) for (let j = 0; j <= i; j++) matrix[i * n + j] = matrix[j * n + i] = fill(i, j);
  return matrix;
}

describe('symmetricEigen', () => {
  it('solves A v = lambda v with orthonormal vectors for random matrices of 1 to 40 rows', () => {
    const random = makeRandom(11);
    for (let n = 1; n <= 40; n++) {
      const [residual, angle] = defects(
        symmetric(n, () => random.normal()),
        n,
      );
      expect(residual).toBeLessThan(1e-12 * n);
      expect(angle).toBeLessThan(1e-12 * n);
    }
  });

  it('solves matrices with equal eigenvalues, zero rows, and terms of very different size', () => {
    const cases = [
      symmetric(6, () => 0),
      symmetric(6, (i, j) => (i === j ? 3 : 0)),
      symmetric(6, () => 1),
      symmetric(6, (i, j) => (i === j ? 1e6 * i : 1e-6)),
      symmetric(6, (i, j) => (i === j ? (i % 2) * 100 : i + j === 5 ? 7 : 0)),
    ];
    for (const matrix of cases) {
      const [residual, angle] = defects(matrix, 6);
      const largest = matrix.reduce((most, value) => Math.max(most, Math.abs(value)), 1);
      expect(residual).toBeLessThan(1e-13 * largest);
      expect(angle).toBeLessThan(1e-13);
    }
  });

  it('orders eigenvalues upwards: the known values of the second-difference matrix', () => {
    const n = 9;
    const { values } = symmetricEigen(
      symmetric(n, (i, j) => (i === j ? 2 : Math.abs(i - j) === 1 ? -1 : 0)),
      n,
    );
    // Analytic: 4 sin^2(k pi / (2 (n + 1))).
    for (let k = 1; k <= n; k++) expect(values[k - 1]).toBeCloseTo(4 * Math.sin((k * Math.PI) / (2 * (n + 1))) ** 2, 12);
  });
});
