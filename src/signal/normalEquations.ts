import type { TermColumns } from './addTerm.js';
import type { RegionModel, RegionWindow } from './regionModel.js';
import { choleskyFactor, choleskySolve } from './solveSymmetric.js';

/**
 * Solves the linear part of a region at given nonlinear values and builds the normal equations of the joint problem.
 *
 * Order of unknowns: areas, baseline level, baseline slope (per half width of the window), free parameters. Everything is in
 * units of the noise and whitened.
 *
 * @returns areas, cost with priors, residual (units of the data) and the matrix and right-hand side of a Gauss-Newton step
 * @source  see `fitRegion`; covariance with correlated noise: sandwich form, H. White, Econometrica 1980, 48, 817 (from memory)
 */
export function normalEquations(
  window: RegionWindow,
  model: RegionModel,
  shapes: readonly TermColumns[],
  values: Float64Array,
  free: readonly number[],
) {
  const { data, filter, noise } = window;
  const points = data.length;
  const terms = model.terms.length;
  const linear = terms + 2;
  const half = Math.max(1, (points - 1) / 2);
  const slopeColumn = new Float64Array(points);
  for (let i = 0; i < points; i += 1) slopeColumn[i] = (half - i) / half;
  const whiten = (column: Float64Array) => trusted(whitenColumn(column, filter, 1 / noise), window);
  const ones = trusted(filteredOnes(points, filter, 1 / noise), window);
  const basis = [...shapes.map(({ value }) => whiten(value)), ones, whiten(slopeColumn)];
  const target = whiten(data);
  const priorWeight = (noise > 0 ? 1 : 0) / Math.max(window.baselineU, 1e-300) ** 2;

  const gram = gramOf(basis);
  gram[terms * linear + terms] = gram[terms * linear + terms]! + priorWeight;
  gram[(terms + 1) * linear + terms + 1] = gram[(terms + 1) * linear + terms + 1]! + priorWeight;
  const solution = choleskySolve(
    choleskyFactor(gram, linear),
    linear,
    Float64Array.from(basis, (column) => dot(column, target)),
  );

  const areas = solution.slice(0, terms);
  const level = solution[terms]!;
  const slope = solution[terms + 1]!;
  const residual = new Float64Array(points);
  for (let i = 0; i < points; i += 1) residual[i] = data[i]! - level - slope * slopeColumn[i]!;
  shapes.forEach(({ value }, t) => {
    for (let i = 0; i < points; i += 1) residual[i] = residual[i]! - areas[t]! * value[i]!;
  });
  const whitened = whiten(residual);
  const chiSquare = dot(whitened, whitened);

  const all = [...basis, ...free.map((index) => whiten(derivative(model, shapes, areas, index, points)))];
  const n = all.length;
  const matrix = gramOf(all);
  const right = Float64Array.from(all, (column) => dot(column, whitened));
  let cost = chiSquare + priorWeight * (level * level + slope * slope);
  const prior = new Float64Array(n);
  prior[terms] = priorWeight;
  prior[terms + 1] = priorWeight;
  right[terms] = right[terms]! - priorWeight * level;
  right[terms + 1] = right[terms + 1]! - priorWeight * slope;
  free.forEach((index, k) => {
    const { mean, sigma } = model.parameters[index]!;
    const weight = 1 / (sigma * sigma);
    const off = values[index]! - mean;
    cost += weight * off * off;
    right[linear + k] = right[linear + k]! - weight * off;
    prior[linear + k] = weight;
  });
  for (let k = 0; k < n; k += 1) matrix[k * n + k] = matrix[k * n + k]! + prior[k]!;
  const sandwich = () => meatOf(all, window.filteredCorrelation, prior);
  const slopePerHz = slope / (half * window.stepHz);
  return { areas, level, slopePerHz, cost, chiSquare, residual, whitened, columns: all, matrix, right, sandwich };
}

/** d model / d parameter: the sum over the terms that carry it. */
function derivative(model: RegionModel, shapes: readonly TermColumns[], areas: Float64Array, index: number, points: number) {
  const sum = new Float64Array(points);
  const add = (column: Float64Array, area: number) => addScaled(sum, column, area);
  model.terms.forEach((term, t) => {
    const own = shapes[t]!;
    const area = areas[t]!;
    if (term.shift === index) add(own.byShift, area);
    if (term.phase === index) add(own.byPhase, area);
    if (model.lorentzShare === index) add(own.byLorentzShare, area);
    for (const width of term.widths) if (width === index) add(own.byLogWidth, area);
    term.couplings.forEach((coupling, k) => {
      if (coupling === index) add(own.byCoupling[k]!, area);
    });
  });
  return sum;
}

function addScaled(target: Float64Array, source: Float64Array, factor: number): void {
  for (let i = 0; i < target.length; i += 1) target[i] = target[i]! + factor * source[i]!;
}

/** The first taps of each window see a shortened past: those points are left out. */
export function whitenColumn(column: Float64Array, filter: Float64Array, scale: number): Float64Array {
  const order = filter.length - 1;
  if (order === 0) {
    const only = new Float64Array(column.length);
    for (let i = 0; i < only.length; i += 1) only[i] = column[i]! * filter[0]! * scale;
    return only;
  }
  const out = new Float64Array(Math.max(0, column.length - order));
  for (let i = 0; i < out.length; i += 1) {
    let sum = 0;
    for (let k = 0; k <= order; k += 1) sum += filter[k]! * column[i + order - k]!;
    out[i] = sum * scale;
  }
  return out;
}

/** Weighs whitened rows in place by how well the model is known there. */
function trusted(column: Float64Array, { trust, filter }: RegionWindow): Float64Array {
  if (trust === undefined) return column;
  for (let i = 0; i < column.length; i += 1) column[i] = column[i]! * trust[i + filter.length - 1]!;
  return column;
}

function filteredOnes(points: number, filter: Float64Array, scale: number): Float64Array {
  const sum = filter.reduce((total, tap) => total + tap, 0);
  return new Float64Array(Math.max(0, points - filter.length + 1)).fill(sum * scale);
}

function gramOf(columns: readonly Float64Array[]): Float64Array {
  const n = columns.length;
  const gram = new Float64Array(n * n);
  for (let i = 0; i < n; i += 1) {
    for (let j = 0; j <= i; j += 1) {
      const value = dot(columns[i]!, columns[j]!);
      gram[i * n + j] = value;
      gram[j * n + i] = value;
    }
  }
  return gram;
}

/** J^T R J for noise of autocorrelation R, plus what the priors contribute as if each were one more measurement. */
function meatOf(columns: readonly Float64Array[], correlation: Float64Array, prior: Float64Array): Float64Array {
  const n = columns.length;
  const meat = new Float64Array(n * n);
  for (let j = 0; j < n; j += 1) {
    const spread = correlated(columns[j]!, correlation);
    for (let i = 0; i < n; i += 1) meat[i * n + j] = dot(columns[i]!, spread);
  }
  for (let k = 0; k < n; k += 1) meat[k * n + k] = meat[k * n + k]! + prior[k]!;
  return meat;
}

/** R x for a stationary autocorrelation. */
function correlated(column: Float64Array, correlation: Float64Array): Float64Array {
  const out = Float64Array.from(column);
  for (let lag = 1; lag < correlation.length; lag += 1) {
    const weight = correlation[lag]!;
    for (let i = lag; i < column.length; i += 1) {
      out[i] = out[i]! + weight * column[i - lag]!;
      out[i - lag] = out[i - lag]! + weight * column[i]!;
    }
  }
  return out;
}

function dot(a: Float64Array, b: Float64Array): number {
  let sum = 0;
  for (let i = 0; i < a.length; i += 1) sum += a[i]! * b[i]!;
  return sum;
}
