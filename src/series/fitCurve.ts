/** A fitted curve: parameters, covariance scaled by lack of fit, chi-square. */
export interface CurveFit {
  readonly parameters: readonly number[];
  /** shape (p, p): inverse of J^T W J, not scaled. */
  readonly covariance: readonly (readonly number[])[];
  /** Weighted sum of squared residuals. */
  readonly chiSquare: number;
  readonly residuals: readonly number[];
  readonly isConverged: boolean;
}

type Model = (parameters: readonly number[], x: number) => number;

const turnsMax = 400;
const cautions = [1e-3, 10, 1e4];

/**
 * Weighted nonlinear least squares by Levenberg and Marquardt with column scaling; derivatives by central differences.
 *
 * @param model   f(parameters, x)
 * @param x       shape (n)
 * @param y       shape (n)
 * @param weights shape (n), 1/u^2
 * @param start   shape (p)
 * @returns the minimum reached
 * @source Marquardt, J. Soc. Ind. Appl. Math. 1963, 11, 431; scaling: More, Lect. Notes Math. 1978, 630, 105; checked against the
 *         certified values of NIST StRD
 */
export function fitCurve(
  model: Model,
  x: readonly number[],
  y: readonly number[],
  weights: readonly number[],
  start: readonly number[],
): CurveFit {
  // A hard start may lead into a far valley; more caution at the beginning finds another way. The lowest minimum counts.
  let best: CurveFit | undefined;
  for (const caution of cautions) {
    const fit = descend(model, x, y, weights, start, caution);
    if (!best || fit.chiSquare < best.chiSquare * (1 - 1e-9)) best = fit;
  }
  return best!;
}

function descend(
  model: Model,
  x: readonly number[],
  y: readonly number[],
  weights: readonly number[],
  start: readonly number[],
  caution: number,
): CurveFit {
  let parameters = [...start];
  let residuals = residualsOf(model, parameters, x, y);
  let chiSquare = sumOf(residuals, weights);
  let damping = caution;
  let isConverged = false;
  let still = 0;
  for (let turn = 0; turn < turnsMax && !isConverged; turn += 1) {
    const jacobian = jacobianOf(model, parameters, x);
    const { normal, right } = normalOf(jacobian, residuals, weights);
    let isBetter = false;
    for (let attempt = 0; attempt < 30 && !isBetter; attempt += 1) {
      const step = solveScaled(normal, right, damping);
      const trial = step ? parameters.map((value, index) => value + step[index]!) : undefined;
      const trialResiduals = trial ? residualsOf(model, trial, x, y) : undefined;
      const trialChi = trialResiduals ? sumOf(trialResiduals, weights) : Number.NaN;
      if (trial && trialResiduals && trialChi <= chiSquare) {
        const gain = (chiSquare - trialChi) / Math.max(chiSquare, 1e-300);
        const moved = Math.max(...trial.map((value, index) => Math.abs(value - parameters[index]!) / (Math.abs(value) + 1e-300)));
        [parameters, residuals, chiSquare] = [trial, trialResiduals, trialChi];
        damping = Math.max(damping / 8, 1e-14);
        still = gain < 1e-12 && moved < 1e-8 ? still + 1 : 0;
        isBetter = true;
      } else damping *= 5;
    }
    isConverged = !isBetter || still >= 2;
  }
  const { normal } = normalOf(jacobianOf(model, parameters, x), residuals, weights);
  return { parameters, covariance: invert(normal), chiSquare, residuals, isConverged };
}

function residualsOf(model: Model, parameters: readonly number[], x: readonly number[], y: readonly number[]): number[] {
  return x.map((value, index) => y[index]! - model(parameters, value));
}

function sumOf(residuals: readonly number[], weights: readonly number[]): number {
  let sum = 0;
  for (let i = 0; i < residuals.length; i += 1) sum += weights[i]! * residuals[i]! ** 2;
  return sum;
}

function jacobianOf(model: Model, parameters: readonly number[], x: readonly number[]): number[][] {
  return parameters.map((value, column) => {
    const step = 6e-6 * Math.max(Math.abs(value), 1e-9);
    const [up, down] = [[...parameters], [...parameters]];
    up[column] = value + step;
    down[column] = value - step;
    return x.map((at) => (model(up, at) - model(down, at)) / (2 * step));
  });
}

function normalOf(
  jacobian: readonly (readonly number[])[],
  residuals: readonly number[],
  weights: readonly number[],
): { normal: number[][]; right: number[] } {
  const normal = jacobian.map((a) => jacobian.map((b) => a.reduce((sum, value, i) => sum + weights[i]! * value * b[i]!, 0)));
  const right = jacobian.map((a) => a.reduce((sum, value, i) => sum + weights[i]! * value * residuals[i]!, 0));
  return { normal, right };
}

/** Solves (N + damping diag N) step = right with columns scaled to unit diagonal. */
function solveScaled(normal: readonly (readonly number[])[], right: readonly number[], damping: number): number[] | undefined {
  const scale = normal.map((row, index) => 1 / Math.sqrt(Math.max(row[index]!, 1e-300)));
  const matrix = normal.map((row, a) => row.map((value, b) => value * scale[a]! * scale[b]! + (a === b ? damping : 0)));
  const solution = solve(
    matrix,
    right.map((value, index) => value * scale[index]!),
  );
  return solution?.map((value, index) => value * scale[index]!);
}

/** Gaussian elimination with pivoting. */
export function solve(matrix: readonly (readonly number[])[], right: readonly number[]): number[] | undefined {
  const n = right.length;
  const work = matrix.map((row, index) => [...row, right[index]!]);
  for (let k = 0; k < n; k += 1) {
    let pivot = k;
    for (let row = k + 1; row < n; row += 1) if (Math.abs(work[row]![k]!) > Math.abs(work[pivot]![k]!)) pivot = row;
    [work[k], work[pivot]] = [work[pivot]!, work[k]!];
    const head = work[k]!;
    if (!(Math.abs(head[k]!) > 1e-300)) return undefined;
    for (let row = 0; row < n; row += 1) {
      if (row === k) continue;
      const line = work[row]!;
      const factor = line[k]! / head[k]!;
      for (let column = k; column <= n; column += 1) line[column] = line[column]! - factor * head[column]!;
    }
  }
  return work.map((row, index) => row[n]! / row[index]!);
}

function invert(normal: readonly (readonly number[])[]): number[][] {
  const n = normal.length;
  const scale = normal.map((row, index) => 1 / Math.sqrt(Math.max(row[index]!, 1e-300)));
  const matrix = normal.map((row, a) => row.map((value, b) => value * scale[a]! * scale[b]!));
  const columns = Array.from({ length: n }, (_, column) =>
    solve(
      matrix,
      Array.from({ length: n }, (__, row) => (row === column ? 1 : 0)),
    ),
  );
  return Array.from({ length: n }, (_, a) =>
    Array.from({ length: n }, (__, b) => (columns[b]?.[a] ?? Number.POSITIVE_INFINITY) * scale[a]! * scale[b]!),
  );
}
