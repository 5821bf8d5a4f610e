import { slopePull } from './scanFirstOrder.js';

/** A phase over the whole spectrum: zero order at its centre, first order from end to end. */
export interface PhaseFit {
  readonly zeroRad: number;
  readonly firstRad: number;
  /** Weighted rms of what the straight line leaves, radians. */
  readonly restRad: number;
  readonly groups: number;
}

/** No group is believed better than this: line shapes are never known wholly. */
const uLeastRad = (0.12 * Math.PI) / 180;
/** How far the slope may reasonably lie from the best one of the scan. */
const priorRad = Math.PI;

/**
 * Lays a straight line through the local phases, which are known but for whole turns: the branch by scanning the slope for the best
 * agreement on the circle, then robust weighted least squares.
 *
 * @param phases     local phases with uncertainty
 * @param pointCount n of the spectrum
 * @param startRad   slope known so far
 * @param rangeRad   least and greatest slope
 * @returns zero and first order; zero order only for a single group
 * @source Cauchy weights: Holland, Welsch, Commun. Stat. A 1977, 6, 813
 */
export function fitPhase(
  phases: readonly { readonly index: number; readonly phaseRad: number; readonly u: number }[],
  pointCount: number,
  startRad: number,
  rangeRad: readonly [number, number],
): PhaseFit {
  const data = phases.map(({ index, phaseRad, u }) => ({ x: index / pointCount - 0.5, phaseRad, u: Math.hypot(u, uLeastRad) }));
  if (data.length === 0) return { zeroRad: 0, firstRad: startRad, restRad: Number.NaN, groups: 0 };
  // Lines at the edges may be folded in from beyond, with a phase of their own.
  const inner = data.filter(({ x }) => Math.abs(x) < edge);
  const used = inner.length >= 2 ? inner : data;
  const fits = scan(used, startRad, rangeRad).map((start) => refine(used, start));
  return fits.reduce((best, fit) => (fit.cost < best.cost ? fit : best));
}

/** Beyond this place, of half a spectrum either way, lines may be folded. */
const edge = 0.475;
/** Starts of the fine search that are tried, at least this far apart in slope. */
const startsMax = 5;
const startsApartRad = Math.PI / 4;

type Datum = { readonly x: number; readonly phaseRad: number; readonly u: number };

function scan(
  data: readonly Datum[],
  startRad: number,
  [low, high]: readonly [number, number],
): { zeroRad: number; firstRad: number }[] {
  const step = (2 * Math.PI) / 120;
  const [first, last] = [Math.ceil((low - startRad) / step), Math.floor((high - startRad) / step)];
  const pull = slopePull([low, high]);
  const weights = data.map(({ u }) => 1 / (u + 0.12));
  const total = weights.reduce((sum, value) => sum + value, 0);
  const tried: { zeroRad: number; firstRad: number; score: number }[] = [];
  for (let k = first; k <= last; k += 1) {
    const firstRad = startRad + k * step;
    let [re, im] = [0, 0];
    data.forEach(({ x, phaseRad }, index) => {
      re += weights[index]! * Math.cos(phaseRad - firstRad * x);
      im += weights[index]! * Math.sin(phaseRad - firstRad * x);
    });
    const score = Math.hypot(re, im) / total - pull * Math.abs(firstRad);
    tried.push({ zeroRad: Math.atan2(im, re), firstRad, score });
  }
  tried.sort((p, q) => q.score - p.score);
  const starts: typeof tried = [];
  for (const one of tried) {
    if (starts.length === startsMax || (starts[0] && one.score < starts[0].score - 0.15)) break;
    if (starts.every(({ firstRad }) => Math.abs(firstRad - one.firstRad) >= startsApartRad)) starts.push(one);
  }
  return starts.length > 0 ? starts : [{ zeroRad: 0, firstRad: startRad }];
}

/** Scatter of local phases that costs little, and what a radian of slope costs. */
const costRad = 0.03;
const costPerRad = 0.02;

function refine(data: readonly Datum[], start: { zeroRad: number; firstRad: number }): PhaseFit & { cost: number } {
  let { zeroRad, firstRad } = start;
  let restRad = 0;
  for (let turn = 0; turn < 40; turn += 1) {
    const rests = data.map(({ x, phaseRad }) => wrap(phaseRad - zeroRad - firstRad * x));
    // The scatter in units of the stated uncertainties: what the stated ones leave out widens all alike.
    const scale = Math.max(
      1,
      1.5 * weightedMedian(rests.map((rest, index) => ({ value: Math.abs(rest) / data[index]!.u, weight: 1 / data[index]!.u }))),
    );
    const prior = 1 / priorRad ** 2;
    let [s, sx, sxx, sy, sxy, rest2] = [0, 0, prior, 0, prior * (start.firstRad - firstRad), 0];
    data.forEach(({ x, u }, index) => {
      const rest = rests[index]!;
      const weight = 1 / (u * u * scale * scale) / (1 + (rest / (2 * scale * u)) ** 2);
      s += weight;
      sx += weight * x;
      sxx += weight * x * x;
      sy += weight * rest;
      sxy += weight * x * rest;
      rest2 += weight * rest * rest;
    });
    const determinant = s * sxx - sx * sx;
    const [dZero, dFirst] = [(sxx * sy - sx * sxy) / determinant, (s * sxy - sx * sy) / determinant];
    zeroRad += dZero;
    firstRad += dFirst;
    restRad = Math.sqrt(rest2 / s);
    if (Math.abs(dZero) + Math.abs(dFirst) < 1e-7) break;
  }
  // Cauchy's own measure, at a scale that does not depend on the start: many good groups weigh more than one far off. Large slopes pay.
  const cost = data.reduce((sum, { x, phaseRad, u }) => {
    const scale = 2 * Math.hypot(u, costRad);
    return sum + Math.log1p((wrap(phaseRad - zeroRad - firstRad * x) / scale) ** 2) / Math.sqrt(scale);
  }, 0);
  const total = data.reduce((sum, { u }) => sum + 1 / Math.sqrt(2 * Math.hypot(u, costRad)), 0);
  return { zeroRad: wrap(zeroRad), firstRad, restRad, groups: data.length, cost: cost / total + costPerRad * Math.abs(firstRad) };
}

function weightedMedian(values: { readonly value: number; readonly weight: number }[]): number {
  const sorted = [...values].sort((a, b) => a.value - b.value);
  const half = sorted.reduce((sum, { weight }) => sum + weight, 0) / 2;
  let running = 0;
  for (const { value, weight } of sorted) {
    running += weight;
    if (running >= half) return value;
  }
  return 0;
}

/** Into (-pi, pi]. */
export function wrap(angleRad: number): number {
  return angleRad - 2 * Math.PI * Math.round(angleRad / (2 * Math.PI));
}
