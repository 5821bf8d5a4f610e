import { bestPhase } from './bestPhase.js';
import { choleskySolve } from './choleskySolve.js';
import type { ComplexSpectrum } from './complexSpectrum.js';
import type { Peak } from './findPeaks.js';
import type { PeakGroup } from './groupPeaks.js';

/** One column of a group's model: a power of the complex Lorentzian, times i or not. */
export interface LineColumn {
  readonly peak: Peak;
  readonly power: 1 | 2 | 3;
  readonly isTurned: boolean;
  /** A line beyond the group, of any phase. */
  readonly isFar: boolean;
}

/** What the fit of one group found. */
export interface GroupFit {
  readonly group: PeakGroup;
  /** Fractional index at which `phaseRad` holds. */
  readonly index: number;
  readonly phaseRad: number;
  /** Standard uncertainty, radians, from noise and misfit of the group. */
  readonly u: number;
  /** Columns of the members with their real coefficients, in phase. */
  readonly columns: readonly LineColumn[];
  readonly coefficients: Float64Array;
}

/** How the first-order phase acts, see `fitGroup`. */
export interface SlopeOf {
  /** Radians from point to point. */
  readonly step: number;
  /** True: the phase turns through each line (a shift in time). False: each line has one phase (points are missing). */
  readonly turnsThrough: boolean;
}

const pointsPerGroupMax = 200;
/** Lines above this many times the noise get a shape of their own. */
const shapedFrom = 100;

/**
 * Fits one group of lines and its common phase at time zero. In time a line is exp(-pi w t) times a slow function that shim and drift
 * make; with that function as a power series the line is L, L^2, L^3 in frequency, L the complex Lorentzian. The amplitudes of L
 * are real, those of the higher terms free: the phase that leaves the least residual follows in closed form from a 2 x 2 matrix, and
 * its curvature gives the uncertainty. A complex constant and slope take up humps and rolling baselines.
 *
 * @param spectrum shape (n), not phased
 * @param group    lines, guests, far lines, range
 * @param noise    rms of one quadrature
 * @param slope    first-order phase known so far
 * @param additions how many times lines may be added where the rest stands out most
 * @returns undefined when the lines cannot be told apart at all
 * @source own derivation: residual(phi) = |y|^2 - b^T G^-1 b, b = cos(phi) Re(A^H y) + sin(phi) Im(A^H y); the variance of the
 *   amplitude at time zero grows as the number of terms (Laguerre polynomials are 1 at zero)
 */
export function fitGroup(
  spectrum: ComplexSpectrum,
  group: PeakGroup,
  noise: number,
  slope: SlopeOf,
  additions = 0,
): GroupFit | undefined {
  const { members, from, to } = group;
  const columns = columnsOf(group, noise);
  const size = columns.length + 4;
  const gram = new Float64Array(size * size);
  const [u, v] = [new Float64Array(size), new Float64Array(size)];
  const [re, im] = [new Float64Array(size), new Float64Array(size)];
  const stride = Math.max(1, Math.floor((to - from) / pointsPerGroupMax));
  const total = members.reduce((sum, { magnitude }) => sum + magnitude, 0);
  const centre = members.reduce((sum, { index, magnitude }) => sum + index * magnitude, 0) / total;
  const turns = columns.map(({ peak, isFar }) => (slope.turnsThrough || isFar ? 0 : slope.step * (peak.index - centre)));
  const dataStep = slope.turnsThrough ? slope.step : 0;
  const kept: { readonly x: number; readonly y: number }[] = [];
  let [energy, count] = [0, 0];
  for (let i = from; i <= to; i += stride) {
    fillLineColumns(columns, turns, i, re, im);
    fillConstants(re, im, columns.length, (2 * (i - from)) / Math.max(1, to - from) - 1);
    const [c, s] = [Math.cos(dataStep * (i - centre)), Math.sin(dataStep * (i - centre))];
    const x = spectrum.real[i]! * c + spectrum.imag[i]! * s;
    const y = spectrum.imag[i]! * c - spectrum.real[i]! * s;
    accumulate(gram, u, v, re, im, x, y);
    kept.push({ x, y });
    energy += x * x + y * y;
    count += 1;
  }
  const solved = choleskySolve(gram, size, [u, v]);
  if (!solved) return undefined;
  const best = bestPhase(u, v, solved[0]!, solved[1]!, kept);
  if (additions > 0) {
    const tallest = Math.max(...members.map((one) => one.magnitude));
    const least = Math.max(restOverNoise * noise, restShare * tallest);
    const missing = worstRests(spectrum, group, columns, turns, best, dataStep, centre, stride, least);
    if (missing.length > 0) {
      const wider = { ...group, members: [...members, ...missing].sort((p, q) => p.index - q.index) };
      const again = fitGroup(spectrum, wider, noise, slope, additions - 1);
      if (again) return again;
    }
  }
  const excess = Math.max(0, energy - best.explained - 2 * count * noise * noise);
  // Noise of neighbouring points is alike by window and filling; what is not noise may pull all one way.
  const variance = (stride === 1 ? 2.2 : 1.5) * noise * noise + misfitShare * excess;
  const own = columns.filter(({ isFar, peak }) => !isFar && members.includes(peak));
  return {
    group,
    index: centre,
    phaseRad: best.phaseRad,
    u: Math.min(2, Math.sqrt(variance / Math.max(best.curvature, 1e-300))),
    columns: own,
    coefficients: Float64Array.from(own, (column) => best.coefficients[columns.indexOf(column)]!),
  };
}

const restOverNoise = 6;
const restShare = 0.01;

/** The places where the fit leaves most, at most three, apart by a width. */
function worstRests(
  spectrum: ComplexSpectrum,
  { members, from, to }: PeakGroup,
  columns: readonly LineColumn[],
  turns: readonly number[],
  best: { readonly phaseRad: number; readonly coefficients: Float64Array },
  dataStep: number,
  centre: number,
  stride: number,
  least: number,
): Peak[] {
  const size = best.coefficients.length;
  const [re, im] = [new Float64Array(size), new Float64Array(size)];
  const [pc, ps] = [Math.cos(best.phaseRad), Math.sin(best.phaseRad)];
  const widthPoints = Math.min(...members.map((one) => one.widthPoints));
  const rests: Peak[] = [];
  for (let i = from; i <= to; i += stride) {
    fillLineColumns(columns, turns, i, re, im);
    fillConstants(re, im, columns.length, (2 * (i - from)) / Math.max(1, to - from) - 1);
    let [mr, mi] = [0, 0];
    for (let k = 0; k < size; k += 1) {
      mr += best.coefficients[k]! * re[k]!;
      mi += best.coefficients[k]! * im[k]!;
    }
    const [c, s] = [Math.cos(dataStep * (i - centre)), Math.sin(dataStep * (i - centre))];
    const x = spectrum.real[i]! * c + spectrum.imag[i]! * s - (mr * pc - mi * ps);
    const y = spectrum.imag[i]! * c - spectrum.real[i]! * s - (mr * ps + mi * pc);
    const magnitude = Math.hypot(x, y);
    if (magnitude > least) rests.push({ index: i, magnitude, widthPoints });
  }
  rests.sort((p, q) => q.magnitude - p.magnitude);
  const picked: Peak[] = [];
  for (const rest of rests) {
    if (picked.length === 3) break;
    if (picked.every(({ index }) => Math.abs(index - rest.index) > widthPoints)) picked.push(rest);
  }
  return picked;
}

const misfitShare = 0.25;

function columnsOf({ members, guests, far }: PeakGroup, noise: number): LineColumn[] {
  const columns: LineColumn[] = [];
  for (const peak of [...members, ...guests]) {
    const add = (power: 1 | 2 | 3, isTurned: boolean) => columns.push({ peak, power, isTurned, isFar: false });
    add(1, false);
    add(2, false);
    add(2, true);
    if (!members.includes(peak) || peak.magnitude <= shapedFrom * noise) continue;
    add(3, false);
    add(3, true);
  }
  for (const peak of far) for (const isTurned of [false, true]) columns.push({ peak, power: 1, isTurned, isFar: true });
  return columns;
}

/** Values of the columns at point i: L = (w/2) / (w/2 + i (x - x0)), its powers, turned as asked. */
export function fillLineColumns(
  columns: readonly LineColumn[],
  turns: readonly number[],
  i: number,
  re: Float64Array,
  im: Float64Array,
): void {
  let lr = 0;
  let li = 0;
  let pr = 0;
  let pi = 0;
  for (let k = 0; k < columns.length; k += 1) {
    const { peak, power, isTurned } = columns[k]!;
    if (power === 1 && !isTurned) {
      const half = peak.widthPoints / 2;
      const distance = i - peak.index;
      const scale = half / (half * half + distance * distance);
      lr = half * scale;
      li = -distance * scale;
      const turn = turns[k]!;
      const c = turn === 0 ? 1 : Math.cos(turn);
      const s = turn === 0 ? 0 : Math.sin(turn);
      pr = lr * c - li * s;
      pi = lr * s + li * c;
    } else if (!isTurned) {
      const next = pr * lr - pi * li;
      pi = pr * li + pi * lr;
      pr = next;
    }
    re[k] = isTurned ? -pi : pr;
    im[k] = isTurned ? pr : pi;
  }
}

/** A complex constant and a complex slope, each as two real columns. */
function fillConstants(re: Float64Array, im: Float64Array, at: number, slope: number): void {
  re[at] = 1;
  im[at + 1] = 1;
  re[at + 2] = slope;
  im[at + 3] = slope;
}

function accumulate(
  gram: Float64Array,
  u: Float64Array,
  v: Float64Array,
  re: Float64Array,
  im: Float64Array,
  x: number,
  y: number,
): void {
  const size = u.length;
  for (let a = 0; a < size; a += 1) {
    const ar = re[a]!;
    const ai = im[a]!;
    u[a] = u[a]! + ar * x + ai * y;
    v[a] = v[a]! + ar * y - ai * x;
    const row = a * size;
    for (let b = 0; b <= a; b += 1) gram[row + b] = gram[row + b]! + ar * re[b]! + ai * im[b]!;
  }
}
