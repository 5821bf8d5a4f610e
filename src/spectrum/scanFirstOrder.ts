import type { ComplexSpectrum } from './complexSpectrum.js';
import type { Peak } from './findPeaks.js';

const stepRad = (2 * Math.PI) / 12;
/**
 * What a turn of slope costs: dead times are a few points, and an onset seen in time is right within one. Where nothing was seen in
 * time, any onset is nearly as likely as none.
 */
export function slopePull([low, high]: readonly [number, number]): number {
  const turns = (high - low) / (2 * Math.PI);
  return Math.min(0.05, 0.3 / Math.max(turns, 1)) / (2 * Math.PI);
}

/**
 * A first guess of the first-order phase: the slope under which the phases at the tops of the lines agree best on the circle.
 *
 * @param spectrum not phased, shape (n)
 * @param peaks    maxima of the magnitude, strongest first
 * @param noise    rms of one quadrature
 * @param rangeRad least and greatest slope from one end of the spectrum to the other
 * @returns slope in radians from end to end, and how well the lines agree (0 to 1)
 * @source circular statistics: length of the mean resultant
 */
export function scanFirstOrder(
  spectrum: ComplexSpectrum,
  peaks: readonly Peak[],
  noise: number,
  rangeRad: readonly [number, number],
): { readonly slopeRad: number; readonly agreement: number } {
  const n = spectrum.real.length;
  const tops = peaks.slice(0, 60).map(({ index, magnitude }) => {
    const at = Math.round(index);
    const angle = Math.atan2(spectrum.imag[at]!, spectrum.real[at]!);
    const weight = Math.sqrt(Math.min(magnitude / noise, 400));
    return { x: index / n - 0.5, re: weight * Math.cos(angle), im: weight * Math.sin(angle), weight };
  });
  const total = tops.reduce((sum, { weight }) => sum + weight, 0);
  const [low, high] = rangeRad;
  const middle = Math.max(low, Math.min(high, 0));
  const pull = slopePull(rangeRad);
  let best = { slopeRad: middle, agreement: 0, score: Number.NEGATIVE_INFINITY };
  const count = Math.max(1, Math.ceil((high - low) / stepRad));
  for (let k = 0; k <= count; k += 1) {
    const slopeRad = low + ((high - low) * k) / count;
    let [re, im] = [0, 0];
    for (const top of tops) {
      const [c, s] = [Math.cos(slopeRad * top.x), Math.sin(slopeRad * top.x)];
      re += top.re * c + top.im * s;
      im += top.im * c - top.re * s;
    }
    const agreement = total > 0 ? Math.hypot(re, im) / total : 0;
    const score = agreement - pull * Math.abs(slopeRad - middle);
    if (score > best.score) best = { slopeRad, agreement, score };
  }
  return best;
}
