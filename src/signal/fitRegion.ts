import { addTerm, termColumns } from './addTerm.js';
import { normalEquations } from './normalEquations.js';
import type { RegionFit, RegionModel, RegionWindow } from './regionModel.js';
import { choleskyFactor, choleskyInverse, choleskySolve } from './solveSymmetric.js';

const stepsMax = 40;
/** In units of chi-square: far below what one standard uncertainty changes (1). */
const costTolerance = 2e-3;
const relativeTolerance = 1e-6;

type Evaluation = ReturnType<typeof normalEquations>;

/**
 * Fits one region by variable projection: areas and the local baseline (level and slope, held by their prior) are solved
 * linearly at every step, shifts, widths, phase and couplings by damped Gauss-Newton steps on the projected problem.
 *
 * @param window the points, whitened inside
 * @param model  terms and parameters with priors and bounds; a parameter of sigma 0 is held at its start
 * @returns areas (units of the data x Hz), values, and the covariance of all of them with correlated noise accounted for
 * @source  G. H. Golub, V. Pereyra, SIAM J. Numer. Anal. 1973, 10, 413; L. Kaufman, BIT 1975, 15, 49; damping after
 *          D. W. Marquardt, J. Soc. Ind. Appl. Math. 1963, 11, 431 (from memory)
 */
export function fitRegion(window: RegionWindow, model: RegionModel): RegionFit {
  const free = model.parameters.flatMap((parameter, index) => (parameter.sigma > 0 ? [index] : []));
  let values = Float64Array.from(model.parameters, (parameter) => clamp(parameter.start, parameter.low, parameter.high));
  let current = evaluate(window, model, values, free);
  let damping = 1e-3;
  for (let step = 0; step < stepsMax; step += 1) {
    const next = stepFrom(current, model, values, free, damping);
    const trial = evaluate(window, model, next, free);
    const gain = current.cost - trial.cost;
    if (gain >= 0) {
      values = next;
      current = trial;
      damping = Math.max(damping / 8, 1e-9);
      if (gain < costTolerance + relativeTolerance * trial.cost) break;
    } else {
      if (gain > -costTolerance * 1e-3 || damping > 1e8) break;
      damping *= 6;
    }
  }
  return finish(window, model, values, free, current);
}

function evaluate(window: RegionWindow, model: RegionModel, values: Float64Array, free: readonly number[]): Evaluation {
  const { data } = window;
  const shapes = model.terms.map((term) => {
    const own = termColumns(data.length, term.couplings.length);
    let logWidth = 0;
    for (const index of term.widths) logWidth += values[index]!;
    const state = {
      shiftHz: values[term.shift]!,
      widthHz: Math.exp(logWidth),
      phase: values[term.phase]!,
      lorentzShare: values[model.lorentzShare]!,
      isShareFree: model.parameters[model.lorentzShare]!.sigma > 0,
      couplings: term.couplings.map((index) => values[index]!),
    };
    addTerm(term, state, window, own);
    return own;
  });
  return normalEquations(window, model, shapes, values, free);
}

/** One damped step of the joint problem; areas follow by themselves at the next evaluation. */
function stepFrom(current: Evaluation, model: RegionModel, values: Float64Array, free: readonly number[], damping: number) {
  const linear = model.terms.length + 2;
  const n = linear + free.length;
  const damped = Float64Array.from(current.matrix);
  for (let k = linear; k < n; k += 1) damped[k * n + k] = damped[k * n + k]! * (1 + damping) + 1e-12;
  const step = choleskySolve(choleskyFactor(damped, n), n, current.right);
  const next = Float64Array.from(values);
  free.forEach((index, k) => {
    const { kind, low, high } = model.parameters[index]!;
    const longest = kind === 'log-width' ? 0.5 : Number.POSITIVE_INFINITY;
    next[index] = clamp(values[index]! + clamp(step[linear + k]!, -longest, longest), low, high);
  });
  return next;
}

function finish(
  window: RegionWindow,
  model: RegionModel,
  values: Float64Array,
  free: readonly number[],
  current: Evaluation,
): RegionFit {
  const n = Math.round(Math.sqrt(current.matrix.length));
  const inverse = choleskyInverse(choleskyFactor(current.matrix, n), n);
  const { residual } = current;
  let covariance: Float64Array | undefined;
  return {
    model,
    areas: current.areas,
    level: current.level,
    slopePerHz: current.slopePerHz,
    values,
    covarianceOf: () => {
      covariance ??= sandwichOf(inverse, current.sandwich(), n);
      return covariance;
    },
    size: n,
    chiSquare: current.chiSquare,
    cost: current.cost,
    pointCount: window.data.length,
    columns: current.columns,
    whitened: current.whitened,
    inverse,
    free,
    residual,
    fit: window.data.map((value, index) => value - residual[index]!),
  };
}

/** inverse x meat x inverse. */
function sandwichOf(inverse: Float64Array, meat: Float64Array, n: number): Float64Array {
  return multiply(multiply(inverse, meat, n), inverse, n);
}

function multiply(a: Float64Array, b: Float64Array, n: number): Float64Array {
  const product = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) {
    for (let k = 0; k < n; k += 1) {
      const left = a[i * n + k]!;
      if (left === 0) continue;
      for (let j = 0; j < n; j += 1) product[i * n + j] = product[i * n + j]! + left * b[k * n + j]!;
    }
  }
  return product;
}

function clamp(value: number, low: number, high: number): number {
  return Math.min(Math.max(value, low), high);
}
