/** Longest delayed onset that digital filtering is known to give, points (common practice). */
const onsetPointsMax = 120;
/** The start must stand out of the noise of the tail by this factor before it is believed. */
const clearOverNoise = 6;

/** What the start of a FID shows of its onset. */
export interface Onset {
  /** Whole points before the signal sets in. */
  readonly wholePoints: number;
  /** Where time zero may lie, points; the phases of the lines decide within it. */
  readonly rangePoints: readonly [number, number];
}

/**
 * Finds the delayed onset of a FID: the point at which the signal sets in after the near-silence of digital filtering.
 *
 * At time zero all lines start in phase, so the magnitude is largest right after the onset; the onset is taken where it first
 * reaches half of that. Where the start does not stand out of the noise, nothing is decided here: the range stays wide. The fraction
 * of a point is a first-order phase and is found with it.
 *
 * @param real shape (n)
 * @param imag shape (n)
 * @returns whole points before the onset (0 when the signal is there at once) and the range that remains
 * @source common practice of digital receivers; no private record is read
 */
export function findOnset(real: Float64Array, imag: Float64Array): Onset {
  const reach = Math.min(2 * onsetPointsMax, Math.floor(real.length / 4));
  const size = (k: number) => Math.hypot(real[k]!, imag[k]!);
  let most = 0;
  for (let k = 0; k < reach; k += 1) most = Math.max(most, size(k));
  const unknown: Onset = { wholePoints: 0, rangePoints: [-12, Math.min(100, reach)] };
  if (!(most > clearOverNoise * tailNoise(real, imag))) return unknown;
  let first = 0;
  while (first < reach && size(first) < most / 2) first += 1;
  if (first === 0) return { wholePoints: 0, rangePoints: [-12, 2.5] };
  if (first > onsetPointsMax) return unknown;
  const noise = tailNoise(real, imag);
  const [before, after] = [rmsOf(real, imag, 0, Math.max(1, first - 3)), rmsOf(real, imag, first, first + 16)];
  const isSilent = before < 0.2 * after || (before < 1.4 * noise && after > 2.5 * noise);
  if (!isSilent) return { wholePoints: 0, rangePoints: [-12, first + 2.5] };
  // A few small points may be falsified ones of a FID that starts at once.
  return { wholePoints: first, rangePoints: [first <= 6 ? -3 : first - 4, first + 3] };
}

/** rms of the magnitude over the last tenth, where a FID has mostly died away. */
function tailNoise(real: Float64Array, imag: Float64Array): number {
  return rmsOf(real, imag, Math.floor(real.length * 0.9), real.length);
}

function rmsOf(real: Float64Array, imag: Float64Array, from: number, to: number): number {
  let sum = 0;
  for (let k = from; k < to; k += 1) sum += real[k]! ** 2 + imag[k]! ** 2;
  return Math.sqrt(sum / Math.max(1, to - from));
}
