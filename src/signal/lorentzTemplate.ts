import type { Line } from '../pattern/pattern.js';

/**
 * A pattern of Lorentzians of unit area on a run of points.
 *
 * @param length   points
 * @param place    fractional index of the pattern's centre; index falls with rising shift
 * @param lines    offsets in Hz, shares summing to 1
 * @param widthHz  full width at half height
 * @param stepHz   per point
 * @returns shape (length); its sum x stepHz is 1 when the window holds it all
 * @source  Lorentzian of unit area, see the shared table of methods, section 4
 */
export function lorentzTemplate(
  length: number,
  place: number,
  lines: readonly Line[],
  widthHz: number,
  stepHz: number,
): Float64Array {
  const template = new Float64Array(length);
  const half = widthHz / 2;
  for (const { offsetHz, share } of lines) {
    const middle = place - offsetHz / stepHz;
    for (let i = 0; i < length; i += 1) {
      const distance = (i - middle) * stepHz;
      template[i] = template[i]! + (share * half) / Math.PI / (half * half + distance * distance);
    }
  }
  return template;
}
