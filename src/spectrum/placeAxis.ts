import type { ComplexSpectrum } from './complexSpectrum.js';
import type { Expectation } from './expectations.js';
import type { Peak } from './findPeaks.js';

/** Where the axis lies: shift of the centre, and whether rising index means rising shift. */
export interface AxisPlace {
  readonly centrePpm: number;
  readonly isRising: boolean;
  /** 0 to 1: how well the expected and the found lines meet. */
  readonly score: number;
  /** Score of the best place that is really another one. */
  readonly runnerUp: number;
}

/** Where the header or the site says that the centre lies. */
export interface AxisHintPlace {
  readonly centrePpm: number;
  /** Absent: both directions of frequency are tried. */
  readonly isRising?: boolean;
  /** How far the truth may lie from it, ppm. */
  readonly reachPpm: number;
}

/** Shifts of real samples differ from listed ones by this much, one against the other (common practice). */
const tolerancePpm = 0.03;
const peakCountMax = 48;
const hintBonus = 0.25;

/**
 * Finds the ppm axis by laying what is expected over what is found: every pair of a found peak and an expected shift is a candidate,
 * in both directions of frequency; the one under which most of the expected is found and most of the found is expected wins. The
 * header's axis is a hint that only breaks near-ties.
 *
 * @param spectrum     shape (n)
 * @param observeMhz   MHz
 * @param peaks        maxima, strongest first
 * @param expectations shifts with patterns and sureness
 * @param hint         centre and direction by the header, when it gives any
 * @returns the best place; score 0 when nothing can be laid over anything
 * @source own method; goals in the test bed
 */
export function placeAxis(
  spectrum: ComplexSpectrum,
  observeMhz: number,
  peaks: readonly Peak[],
  expectations: readonly Expectation[],
  hint: AxisHintPlace | undefined,
): AxisPlace {
  const n = spectrum.real.length;
  const found = weighPeaks(peaks, n, spectrum.stepHz / observeMhz);
  const sought = expectations.map((expectation) => ({ ...expectation, reachPpm: reachOf(expectation, observeMhz) }));
  const halfWidthPpm = (n * spectrum.stepHz) / observeMhz / 2;
  const places: AxisPlace[] = [];
  for (const isRising of hint?.isRising !== undefined ? [hint.isRising] : [true, false]) {
    const oriented = orient(found, isRising);
    const stated = hint ? [hint.centrePpm] : [];
    for (const centrePpm of [...stated, ...candidates(oriented, sought, hint)]) {
      const meeting = meet(oriented, sought, centrePpm, halfWidthPpm);
      const isNear = hint !== undefined && Math.abs(centrePpm - hint.centrePpm) < 0.15;
      places.push({ centrePpm, isRising, score: meeting + (isNear ? hintBonus : 0), runnerUp: 0 });
    }
  }
  const best = places.reduce<AxisPlace | undefined>((top, place) => (!top || place.score > top.score ? place : top), undefined);
  if (!best) return { centrePpm: hint?.centrePpm ?? 0, isRising: hint?.isRising ?? true, score: 0, runnerUp: 0 };
  const centrePpm = best.centrePpm + consensusOffset(orient(found, best.isRising), sought, best.centrePpm);
  const others = places.filter(
    (place) => place.isRising !== best.isRising || Math.abs(place.centrePpm - best.centrePpm) > 3 * tolerancePpm,
  );
  return { ...best, centrePpm, runnerUp: others.reduce((top, { score }) => Math.max(top, score), 0) };
}

type Weighed = { readonly offsetPpm: number; readonly weight: number };
type Sought = Expectation & { readonly reachPpm: number };

function orient(found: readonly Weighed[], isRising: boolean): Weighed[] {
  return found
    .map(({ offsetPpm, weight }) => ({ offsetPpm: isRising ? offsetPpm : -offsetPpm, weight }))
    .sort((a, b) => a.offsetPpm - b.offsetPpm);
}

/** Weights grow slowly with height, so that one giant line does not decide alone. */
function weighPeaks(peaks: readonly Peak[], n: number, stepPpm: number): Weighed[] {
  const strongest = peaks.slice(0, peakCountMax);
  const least = strongest.at(-1)?.magnitude ?? 1;
  return strongest.map(({ index, magnitude }) => ({
    offsetPpm: (index - n / 2) * stepPpm,
    weight: 0.3 + Math.log(magnitude / least),
  }));
}

/** Half of the pattern's extent, ppm. */
function reachOf({ lines }: Expectation, observeMhz: number): number {
  return Math.max(0, ...lines.filter(({ share }) => share > 0.02).map(({ offsetHz }) => Math.abs(offsetHz))) / observeMhz;
}

function candidates(found: readonly Weighed[], sought: readonly Sought[], hint: AxisHintPlace | undefined): number[] {
  const strongest = [...found].sort((a, b) => b.weight - a.weight).slice(0, 24);
  const places: number[] = [];
  for (const peak of strongest) for (const { shiftPpm } of sought) places.push(shiftPpm - peak.offsetPpm);
  const near = hint ? places.filter((place) => Math.abs(place - hint.centrePpm) < hint.reachPpm) : places;
  near.sort((a, b) => a - b);
  return near.filter((place, index) => index === 0 || place - near[index - 1]! > 0.004);
}

/** Agreement from 0 to 1: expected that is found, times found that is expected. */
function meet(found: readonly Weighed[], sought: readonly Sought[], centrePpm: number, halfWidthPpm: number): number {
  const explained = new Uint8Array(found.length);
  let [present, total] = [0, 0];
  for (const { shiftPpm, reachPpm, sureness, kind } of sought) {
    const offset = shiftPpm - centrePpm;
    const reach = kind === 'water' ? 0.15 : reachPpm + tolerancePpm;
    total += sureness;
    if (Math.abs(offset) > halfWidthPpm) continue;
    let nearest = Number.POSITIVE_INFINITY;
    for (let k = lowerBound(found, offset - reach); k < found.length && found[k]!.offsetPpm <= offset + reach; k += 1) {
      explained[k] = 1;
      nearest = Math.min(nearest, Math.max(0, Math.abs(found[k]!.offsetPpm - offset) - reachPpm));
    }
    if (nearest <= tolerancePpm * 2) present += sureness * (1 - 0.5 * Math.min(1, nearest / tolerancePpm));
  }
  let [met, all] = [0, 0];
  found.forEach(({ weight }, index) => {
    all += weight;
    if (explained[index] === 1) met += weight;
  });
  return total > 0 && all > 0 ? 0.5 * (present / total) + 0.5 * (met / all) : 0;
}

/**
 * What the met lines agree on: the weighted median of (expected - found) over the expectations, each by the middle of the lines that
 * meet it. One line that is not what it was taken for cannot move it.
 */
function consensusOffset(found: readonly Weighed[], sought: readonly Sought[], centrePpm: number): number {
  const offsets: { value: number; weight: number }[] = [];
  for (const { shiftPpm, reachPpm, sureness, kind } of sought) {
    if (kind === 'water') continue;
    const offset = shiftPpm - centrePpm;
    const reach = reachPpm + 2 * tolerancePpm;
    let [sum, weight] = [0, 0];
    for (let k = lowerBound(found, offset - reach); k < found.length && found[k]!.offsetPpm <= offset + reach; k += 1) {
      sum += found[k]!.offsetPpm * found[k]!.weight;
      weight += found[k]!.weight;
    }
    if (weight > 0) offsets.push({ value: offset - sum / weight, weight: sureness });
  }
  offsets.sort((a, b) => a.value - b.value);
  const half = offsets.reduce((sum, { weight }) => sum + weight, 0) / 2;
  let running = 0;
  for (const { value, weight } of offsets) {
    running += weight;
    if (running >= half) return Math.max(-2 * tolerancePpm, Math.min(2 * tolerancePpm, value));
  }
  return 0;
}

function lowerBound(found: readonly Weighed[], value: number): number {
  let [low, high] = [0, found.length];
  while (low < high) {
    const middle = (low + high) >> 1;
    if (found[middle]!.offsetPpm < value) low = middle + 1;
    else high = middle;
  }
  return low;
}
