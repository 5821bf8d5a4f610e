import type { Expectation } from './expectations.js';

/** A reference line as it was fitted. */
export interface PinnedReference {
  readonly name: string;
  /** ppm by the axis before pinning. */
  readonly foundPpm: number;
  readonly shiftPpm: number;
  readonly widthHz: number;
  /** Height over noise of the matched pattern. */
  readonly signalToNoise: number;
  readonly isSplit: boolean;
  /** Of a single line at a fifth of its height: (far side - near side) / both; 0 is symmetric. */
  readonly asymmetry?: number;
}

/** The axis of a real spectrum, index 0 at the highest shift. */
export interface PlacedAxis {
  readonly firstPpm: number;
  readonly stepPpm: number;
  readonly observeMhz: number;
}

/**
 * Fits the place of an expected pattern near where it should be: a matched filter of its lines over the real spectrum, its top by a
 * parabola, then the strongest line's width at half height.
 *
 * @param real        shape (n), in phase and flat, high to low shift
 * @param axis        the axis before pinning
 * @param noise       rms
 * @param expectation pattern and shift
 * @param withinPpm   searched on either side
 * @returns undefined when nothing stands out by 5 times the noise
 * @source matched filter; full width by linear interpolation between points
 */
export function pinReference(
  real: Float64Array,
  axis: PlacedAxis,
  noise: number,
  expectation: Expectation,
  withinPpm: number,
): PinnedReference | undefined {
  const { firstPpm, stepPpm, observeMhz } = axis;
  const from = Math.max(3, Math.ceil((firstPpm - expectation.shiftPpm - withinPpm) / stepPpm));
  const to = Math.min(real.length - 4, Math.floor((firstPpm - expectation.shiftPpm + withinPpm) / stepPpm));
  if (to - from < 4) return undefined;
  const offsets = expectation.lines.map(({ offsetHz, share }) => ({ points: -offsetHz / observeMhz / stepPpm, share }));
  const power = offsets.reduce((sum, { share }) => sum + share * share, 0);
  const matched = new Float64Array(to - from + 1);
  const favour = new Float64Array(to - from + 1);
  const expectedIndex = (firstPpm - expectation.shiftPpm) / stepPpm;
  for (let i = from; i <= to; i += 1) {
    matched[i - from] = matchedAt(real, i, offsets, power);
    const away = ((i - expectedIndex) * stepPpm) / (withinPpm / 2);
    favour[i - from] = matched[i - from]! * Math.exp(-0.5 * away * away);
  }
  let best = 1;
  for (let i = 1; i < favour.length - 1; i += 1) if (favour[i]! > favour[best]!) best = i;
  best = climb(matched, best);
  const signalToNoise = (matched[best]! * Math.sqrt(power)) / noise;
  if (!(signalToNoise > 5)) return undefined;
  const [left, middle, right] = [matched[best - 1]!, matched[best]!, matched[best + 1]!];
  const curvature = left - 2 * middle + right;
  const shift = curvature < 0 ? Math.max(-0.5, Math.min(0.5, (left - right) / (2 * curvature))) : 0;
  const place = from + best + shift;
  const strongest = offsets.reduce((top, offset) => (offset.share > top.share ? offset : top));
  const top = Math.round(place + strongest.points);
  const widthPoints = halfHeightWidth(real, top);
  return {
    name: expectation.name,
    foundPpm: firstPpm - refineBySymmetry(real, place, offsets.length === 1, widthPoints) * stepPpm,
    shiftPpm: expectation.shiftPpm,
    widthHz: widthPoints * stepPpm * observeMhz,
    signalToNoise,
    isSplit: offsets.length === 1 && hasTwoTops(real, top, widthPoints, noise),
    ...(offsets.length === 1 && signalToNoise > 60 ? { asymmetry: asymmetryAt(real, place, top) } : {}),
  };
}

/**
 * The amplitude of the pattern at a place. Every line must be there: a foreign singlet under one line of a quintet is no quintet, so
 * the least line bounds the whole.
 */
function matchedAt(
  real: Float64Array,
  place: number,
  offsets: readonly { points: number; share: number }[],
  power: number,
): number {
  let sum = 0;
  let least = Number.POSITIVE_INFINITY;
  for (const { points, share } of offsets) {
    const value = valueAt(real, place + points);
    sum += share * value;
    if (share > 0.05) least = Math.min(least, value / share);
  }
  return Math.min(sum / power, 1.5 * least);
}

function climb(values: Float64Array, start: number): number {
  let best = start;
  while (best + 1 < values.length - 1 && values[best + 1]! > values[best]!) best += 1;
  while (best - 1 > 0 && values[best - 1]! > values[best]!) best -= 1;
  return best;
}

function valueAt(real: Float64Array, place: number): number {
  const left = Math.floor(place);
  if (left < 0 || left + 1 >= real.length) return 0;
  return real[left]! + (real[left + 1]! - real[left]!) * (place - left);
}

/** Centre of gravity of 1/y about the top: for a Lorentzian a parabola, fitted by weighted least squares over the upper half. */
function refineBySymmetry(real: Float64Array, place: number, isSingle: boolean, widthPoints: number): number {
  if (!isSingle) return place;
  const reach = Math.max(2, Math.round(widthPoints / 2));
  const middle = Math.round(place);
  let [s0, s1, s2, s3, s4, t0, t1, t2] = [0, 0, 0, 0, 0, 0, 0, 0];
  for (let k = -reach; k <= reach; k += 1) {
    const y = real[middle + k] ?? 0;
    if (!(y > 0)) return place;
    const weight = y ** 4;
    s0 += weight;
    s1 += weight * k;
    s2 += weight * k * k;
    s3 += weight * k ** 3;
    s4 += weight * k ** 4;
    t0 += weight / y;
    t1 += (weight * k) / y;
    t2 += (weight * k * k) / y;
  }
  const determinant = s0 * (s2 * s4 - s3 * s3) - s1 * (s1 * s4 - s2 * s3) + s2 * (s1 * s3 - s2 * s2);
  const b = (s0 * (t1 * s4 - s3 * t2) - t0 * (s1 * s4 - s2 * s3) + s2 * (s1 * t2 - s2 * t1)) / determinant;
  const c = (s0 * (s2 * t2 - s3 * t1) - s1 * (s1 * t2 - s2 * t1) + t0 * (s1 * s3 - s2 * s2)) / determinant;
  const offset = -b / (2 * c);
  return c > 0 && Math.abs(offset) <= reach ? middle + offset : place;
}

function halfHeightWidth(real: Float64Array, top: number): number {
  const half = (real[top] ?? 0) / 2;
  const edge = (step: 1 | -1) => {
    let k = top;
    while (k > 0 && k < real.length - 1 && real[k]! > half) k += step;
    const [inside, outside] = [real[k - step]!, real[k]!];
    return Math.abs(k - step - top) + (inside > outside ? (inside - half) / (inside - outside) : 0);
  };
  return Math.max(1, edge(1) + edge(-1));
}

/** How unequally far the line reaches on both sides at a fifth of its height. */
function asymmetryAt(real: Float64Array, place: number, top: number): number {
  const level = (real[top] ?? 0) / 5;
  const reach = (step: 1 | -1) => {
    let k = top;
    while (k > 0 && k < real.length - 1 && real[k]! > level) k += step;
    const [inside, outside] = [real[k - step]!, real[k]!];
    return Math.abs(k - step - place) + (inside > outside ? (inside - level) / (inside - outside) : 0);
  };
  const [right, left] = [reach(1), reach(-1)];
  return (right - left) / (right + left);
}

/** A second top of comparable height within a few widths, with a real valley between. */
function hasTwoTops(real: Float64Array, top: number, widthPoints: number, noise: number): boolean {
  const reach = Math.ceil(4 * widthPoints);
  const height = real[top] ?? 0;
  for (const step of [1, -1]) {
    let valley = height;
    for (let k = 1; k <= reach; k += 1) {
      const y = real[top + step * k] ?? 0;
      valley = Math.min(valley, y);
      if (y > 0.4 * height && y - valley > Math.max(6 * noise, 0.15 * height)) return true;
    }
  }
  return false;
}
