import type { LineTails } from './lineTails.js';
import { medianOf } from './medianOf.js';

/** Lines are masked to where their tail has fallen to this many times the noise; the rest of the tail is taken out by its formula. */
const fittedTail = 1;
const plainTail = 0.3;
/** What stands out of the smoothed rest by this many times its noise is signal. */
const hiddenLevel = 3.7;

/**
 * Marks the points that lines cover.
 *
 * @param n     points
 * @param tails lines
 * @param noise rms
 * @returns shape (n), 1 where a line is
 */
export function maskLines(n: number, tails: readonly LineTails[], noise: number): Uint8Array {
  const masked = new Uint8Array(n);
  for (const { index, area, widthPoints, isFitted } of tails) {
    const level = (isFitted ? fittedTail : plainTail) * noise;
    const tail = Math.sqrt((area * widthPoints) / (2 * Math.PI * level));
    const reach = Math.min(Math.max(tail, 3 * widthPoints), n / 16);
    masked.fill(1, Math.max(0, Math.floor(index - reach)), Math.min(n, Math.ceil(index + reach)));
  }
  return masked;
}

/**
 * Marks what no peak was found for and yet stands out, up or down, of the rest when smoothed over a line's width.
 *
 * @param real   shape (n)
 * @param masked changed in place
 * @param tailAt tails of the known lines
 * @param levels baseline so far, at bin centres
 * @param noise  rms
 * @param tails  lines, for the usual width
 */
export function maskHidden(
  real: Float64Array,
  masked: Uint8Array,
  tailAt: (i: number) => number,
  levels: Float64Array,
  noise: number,
  tails: readonly LineTails[],
): void {
  const n = real.length;
  const widths = tails.map(({ widthPoints }) => widthPoints).sort((a, b) => a - b);
  const half = Math.max(2, Math.min(Math.floor(n / 512), Math.round(widths[widths.length >> 2] ?? 4)));
  const rest = new Float64Array(n + 1);
  for (let i = 0; i < n; i += 1) {
    const level = levels[Math.min(levels.length - 1, Math.floor((i * levels.length) / n))]!;
    rest[i + 1] = rest[i]! + (masked[i] === 1 ? 0 : real[i]! - tailAt(i) - level);
  }
  // Neighbouring points are alike to about two: the mean of m points has the noise of m / 2.
  const usual = hiddenLevel * noise * Math.sqrt(2 / (2 * half + 1)) * (2 * half + 1);
  const sumAt = (i: number) => Math.abs(rest[i + half + 1]! - rest[i - half]!);
  // Where the baseline so far does not follow, everything would stand out: then only what stands out of the rest counts.
  const sample: number[] = [];
  for (let i = half; i < n - half; i += Math.max(1, Math.floor(n / 6000))) if (masked[i] === 0) sample.push(sumAt(i));
  const limit = Math.max(usual, sample.length > 0 ? 1.4826 * hiddenLevel * medianOf(sample) : 0);
  const marks: number[] = [];
  for (let i = half; i < n - half; i += 1) if (sumAt(i) > limit) marks.push(i);
  for (const i of marks) masked.fill(1, Math.max(0, i - 3 * half), Math.min(n, i + 3 * half + 1));
}
