import type { ComplexSpectrum } from './complexSpectrum.js';
import type { Peak } from './findPeaks.js';

/** The phase at one group of lines. */
export interface LocalPhase {
  /** Fractional index of the group's centre of gravity. */
  readonly index: number;
  readonly phaseRad: number;
  /** Standard uncertainty, radians: noise and misfit of the group. */
  readonly u: number;
}

const linesPerGroupMax = 16;

/**
 * Measures the phase at each group of neighbouring lines: complex Lorentzians with free complex amplitudes are fitted to the group,
 * and the phase of the sum of their areas is the phase of its signal at time zero. Unresolved neighbours may share their phases
 * wrongly between them; their sum does not.
 *
 * @param spectrum shape (n), not phased
 * @param peaks    maxima of the magnitude, any order
 * @param noise    rms of one quadrature
 * @returns one phase a group with its standard uncertainty
 * @source linear least squares on (w/2) / (w/2 + i (x - x0)), the transform of a decaying oscillation
 */
export function localPhases(spectrum: ComplexSpectrum, peaks: readonly Peak[], noise: number): LocalPhase[] {
  return groupPeaks(peaks).flatMap((group) => phaseOfGroup(spectrum, group, noise));
}

function groupPeaks(peaks: readonly Peak[]): Peak[][] {
  const byPlace = [...peaks].sort((a, b) => a.index - b.index);
  const groups: Peak[][] = [];
  for (const peak of byPlace) {
    const group = groups.at(-1);
    const last = group?.at(-1);
    if (group && last && peak.index - last.index < 12 * Math.max(peak.widthPoints, last.widthPoints)) group.push(peak);
    else groups.push([peak]);
  }
  return groups.map((group) => [...group].sort((a, b) => b.magnitude - a.magnitude).slice(0, linesPerGroupMax));
}

function phaseOfGroup({ real, imag }: ComplexSpectrum, group: readonly Peak[], noise: number): LocalPhase[] {
  const widest = Math.max(...group.map(({ widthPoints }) => widthPoints));
  const from = Math.max(0, Math.floor(Math.min(...group.map(({ index }) => index)) - 4 * widest));
  const to = Math.min(real.length - 1, Math.ceil(Math.max(...group.map(({ index }) => index)) + 4 * widest));
  // Two more columns, a complex constant and a slope, take up the tails of lines outside the group.
  const size = group.length + 2;
  const normal = Array.from({ length: size }, () => new Float64Array(2 * size));
  const right = new Float64Array(2 * size);
  const row = new Float64Array(2 * size);
  const stride = Math.max(1, Math.floor((to - from) / 4000));
  let energy = 0;
  let count = 0;
  for (let i = from; i <= to; i += stride) {
    fillRow(row, group, i, (2 * (i - from)) / Math.max(1, to - from) - 1);
    accumulate(normal, right, row, real[i]!, imag[i]!);
    energy += real[i]! ** 2 + imag[i]! ** 2;
    count += 1;
  }
  const solution = solveHermitian(normal, right);
  if (!solution) return [];
  let explained = 0;
  for (let a = 0; a < size; a += 1) explained += solution[2 * a]! * right[2 * a]! + solution[2 * a + 1]! * right[2 * a + 1]!;
  let [re, im, place, weight] = [0, 0, 0, 0];
  group.forEach(({ widthPoints, index }, k) => {
    re += solution[2 * k]! * widthPoints;
    im += solution[2 * k + 1]! * widthPoints;
    const size = Math.hypot(solution[2 * k]!, solution[2 * k + 1]!) * widthPoints;
    place += index * size;
    weight += size;
  });
  if (!(weight > 0)) return [];
  const misfit = Math.sqrt(Math.max(0, energy - explained) / Math.max(energy, Number.MIN_VALUE));
  const height = Math.max(...group.map(({ magnitude }) => magnitude));
  const points = Math.max(4, Math.min(count, 3 * widest));
  const noiseRad = noise / (height * Math.sqrt(points / 4));
  return [{ index: place / weight, phaseRad: Math.atan2(im, re), u: Math.hypot(noiseRad, 0.25 * misfit, 2e-3) }];
}

/** One row of the design: complex Lorentzians, then a constant and a slope. */
function fillRow(row: Float64Array, group: readonly Peak[], i: number, slope: number): void {
  group.forEach(({ index, widthPoints }, k) => {
    const half = widthPoints / 2;
    const distance = i - index;
    const scale = half / (half * half + distance * distance);
    row[2 * k] = half * scale;
    row[2 * k + 1] = -distance * scale;
  });
  const k = 2 * group.length;
  row[k] = 1;
  row[k + 1] = 0;
  row[k + 2] = slope;
  row[k + 3] = 0;
}

function accumulate(normal: readonly Float64Array[], right: Float64Array, row: Float64Array, re: number, im: number): void {
  const size = normal.length;
  for (let a = 0; a < size; a += 1) {
    const [ar, ai] = [row[2 * a]!, row[2 * a + 1]!];
    right[2 * a] = right[2 * a]! + ar * re + ai * im;
    right[2 * a + 1] = right[2 * a + 1]! + ar * im - ai * re;
    const line = normal[a]!;
    for (let b = a; b < size; b += 1) {
      const [br, bi] = [row[2 * b]!, row[2 * b + 1]!];
      line[2 * b] = line[2 * b]! + ar * br + ai * bi;
      line[2 * b + 1] = line[2 * b + 1]! + ar * bi - ai * br;
    }
  }
}

/** Solves the complex normal equations (upper triangle given) by Gaussian elimination with pivoting. */
function solveHermitian(upper: readonly Float64Array[], right: Float64Array): Float64Array | undefined {
  const size = upper.length;
  const matrix = upper.map((line, a) => {
    const full = new Float64Array(2 * size + 2);
    for (let b = 0; b < size; b += 1) {
      const source = b >= a ? line : upper[b]!;
      const place = Math.max(a, b);
      full[2 * b] = source[2 * place]!;
      full[2 * b + 1] = (b >= a ? 1 : -1) * source[2 * place + 1]!;
    }
    full[2 * a] = full[2 * a]! * (1 + 1e-9);
    full[2 * size] = right[2 * a]!;
    full[2 * size + 1] = right[2 * a + 1]!;
    return full;
  });
  for (let k = 0; k < size; k += 1) {
    let pivot = k;
    for (let a = k + 1; a < size; a += 1) if (sizeAt(matrix[a]!, k) > sizeAt(matrix[pivot]!, k)) pivot = a;
    [matrix[k], matrix[pivot]] = [matrix[pivot]!, matrix[k]!];
    const head = matrix[k]!;
    const norm = head[2 * k]! ** 2 + head[2 * k + 1]! ** 2;
    if (!(norm > 1e-300)) return undefined;
    for (let a = 0; a < size; a += 1) if (a !== k) eliminate(matrix[a]!, head, k, norm);
  }
  const solution = new Float64Array(2 * size);
  matrix.forEach((line, k) => {
    const [dr, di, vr, vi] = [line[2 * k]!, line[2 * k + 1]!, line[2 * size]!, line[2 * size + 1]!];
    const norm = dr * dr + di * di;
    solution[2 * k] = (vr * dr + vi * di) / norm;
    solution[2 * k + 1] = (vi * dr - vr * di) / norm;
  });
  return solution;
}

const sizeAt = (line: Float64Array, k: number) => line[2 * k]! ** 2 + line[2 * k + 1]! ** 2;

function eliminate(line: Float64Array, head: Float64Array, k: number, norm: number): void {
  const [hr, hi] = [head[2 * k]!, head[2 * k + 1]!];
  const fr = (line[2 * k]! * hr + line[2 * k + 1]! * hi) / norm;
  const fi = (line[2 * k + 1]! * hr - line[2 * k]! * hi) / norm;
  for (let b = 2 * k; b < line.length; b += 2) {
    const [re, im] = [head[b]!, head[b + 1]!];
    line[b] = line[b]! - (fr * re - fi * im);
    line[b + 1] = line[b + 1]! - (fr * im + fi * re);
  }
}
