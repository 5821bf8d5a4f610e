import { mergeLines } from './mergeLines.js';
import type { Line, Pattern } from './pattern.js';
import { splitLines } from './splitLines.js';

/** Lines closer than this cannot be told apart at any line width met in a liquid. */
export const coincidentHz = 1e-4;

/** Row n of Pascal's triangle: the intensities that n equivalent spin-1/2 neighbours give. */
export function pascalRow(neighbours: number): number[] {
  const row = [1];
  for (let k = 1; k <= neighbours; k++) row.push((row[k - 1]! * (neighbours - k + 1)) / k);
  return row;
}

/**
 * The lines of a first-order pattern: each splitting by n spin-1/2 neighbours gives n + 1 lines by Pascal's triangle.
 *
 * @param pattern  a declared pattern
 * @returns shape (n), by descending offset, Hz from the centre, shares summing to 1, coincident lines merged; empty when the
 *          pattern declares no lines (`m`, or a coupling that is not given)
 * @source  H. Friebolin, Basic One- and Two-Dimensional NMR Spectroscopy, n + 1 rule (from memory)
 */
export function firstOrderLines(pattern: Pattern): readonly Line[] {
  if (pattern.isMultiplet) return [];
  let lines: readonly Line[] = [{ offsetHz: 0, share: 1 }];
  for (const { neighbours, couplingHz } of pattern.splittings) {
    if (couplingHz === undefined) return [];
    lines = mergeLines(splitLines(lines, pascalRow(neighbours), Math.abs(couplingHz)), coincidentHz);
  }
  return lines;
}
