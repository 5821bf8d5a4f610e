/** Longest delayed onset that digital filtering is known to give, points (common practice). */
const onsetPointsMax = 120;

/**
 * Finds the delayed onset of a FID: the point at which the signal sets in after the near-silence of digital filtering.
 *
 * At time zero all lines start in phase, so the magnitude is largest right after the onset; the onset is taken where it first
 * reaches half of that. The fraction of a point that is left is a first-order phase and is found with it.
 *
 * @param real shape (n)
 * @param imag shape (n)
 * @returns whole points before the onset; 0 when the signal is there from the first points on
 * @source common practice of digital receivers; no private record is read
 */
export function findOnset(real: Float64Array, imag: Float64Array): number {
  const reach = Math.min(2 * onsetPointsMax, Math.floor(real.length / 4));
  let most = 0;
  for (let k = 0; k < reach; k += 1) most = Math.max(most, Math.hypot(real[k]!, imag[k]!));
  if (most === 0) return 0;
  let first = 0;
  while (first < reach && Math.hypot(real[first]!, imag[first]!) < most / 2) first += 1;
  if (first <= 2 || first > onsetPointsMax) return 0;
  let before = 0;
  for (let k = 0; k < first - 4; k += 1) before = Math.max(before, Math.hypot(real[k]!, imag[k]!));
  return before < 0.25 * most ? first : 0;
}
