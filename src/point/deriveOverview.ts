import type { Spectrum } from '../spectrum/spectrum.js';
import type { PointRecord } from './pointRecord.js';

const columnCountMax = 600;

/**
 * Thins a spectrum to one minimum and one maximum per column, so that a drawing of it hides no line.
 *
 * @param spectrum the referenced spectrum, shape (n), high to low shift
 * @returns at most 600 columns, high to low ppm, in units of the noise rounded to three digits
 * @source common practice for drawing long traces
 */
export function deriveOverview(spectrum: Spectrum): NonNullable<PointRecord['overview']> {
  const { real, firstPpm, stepPpm, noise } = spectrum;
  const columnCount = Math.min(columnCountMax, real.length);
  const low: number[] = [];
  const high: number[] = [];
  for (let column = 0; column < columnCount; column += 1) {
    const from = Math.floor((column * real.length) / columnCount);
    const to = Math.max(from + 1, Math.floor(((column + 1) * real.length) / columnCount));
    let least = Number.POSITIVE_INFINITY;
    let most = Number.NEGATIVE_INFINITY;
    for (let index = from; index < to; index += 1) {
      const value = real[index]!;
      if (value < least) least = value;
      if (value > most) most = value;
    }
    low.push(toThreeDigits(least / noise));
    high.push(toThreeDigits(most / noise));
  }
  return { firstPpm, lastPpm: firstPpm - (real.length - 1) * stepPpm, low, high };
}

function toThreeDigits(value: number): number {
  return Number.isFinite(value) ? Number(value.toPrecision(3)) : 0;
}
