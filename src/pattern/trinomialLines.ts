import { coincidentHz } from './firstOrderLines.js';
import { mergeLines } from './mergeLines.js';
import type { Line } from './pattern.js';
import { splitLines } from './splitLines.js';

/** Coefficients of (1 + x + x^2)^n: the intensities that n equivalent spin-1 neighbours give. */
export function trinomialRow(neighbours: number): number[] {
  let row = [1];
  for (let n = 0; n < neighbours; n++) {
    const next = new Array<number>(row.length + 2).fill(0);
    for (const [index, value] of row.entries()) for (let k = 0; k < 3; k++) next[index + k]! += value;
    row = next;
  }
  return row;
}

/**
 * The lines of a signal that couples to deuterium (spin 1): 1:1:1, 1:2:3:2:1 (CHD2), 1:3:6:7:6:3:1 ...
 *
 * @param deuterons   number of equivalent deuterium neighbours
 * @param couplingHz  J(H,D) in Hz; about J(H,H)/6.514
 * @returns shape (2 x deuterons + 1), by descending offset, Hz from the centre, shares summing to 1
 * @source  coefficients of (1 + x + x^2)^n; shared table of deuterated solvents (derived)
 */
export function trinomialLines(deuterons: number, couplingHz: number): readonly Line[] {
  return mergeLines(splitLines([{ offsetHz: 0, share: 1 }], trinomialRow(deuterons), Math.abs(couplingHz)), coincidentHz);
}
