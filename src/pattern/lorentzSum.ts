import type { Line } from './pattern.js';

/**
 * Height of a pattern drawn with Lorentzian lines of unit total area.
 *
 * @param lines     Hz from the centre, shares summing to 1
 * @param widthHz   full width at half height, Hz
 * @param offsetHz  Hz from the centre
 * @returns 1/Hz
 * @source  Lorentzian of area 1: w / (2 pi) / (x^2 + w^2 / 4)
 */
export function lorentzSum(lines: readonly Line[], widthHz: number, offsetHz: number): number {
  const half = widthHz / 2;
  let sum = 0;
  for (const line of lines) {
    const apart = offsetHz - line.offsetHz;
    sum += line.share / (apart * apart + half * half);
  }
  return (sum * half) / Math.PI;
}
