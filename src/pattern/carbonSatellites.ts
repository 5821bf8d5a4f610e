import type { Line } from './pattern.js';

/** Natural abundance of 13C: a share of the protons on carbon shows as two satellites. Source: IUPAC 2013 (1.07 %). */
export const carbon13Share = 0.0107;

/**
 * The usual one-bond C-H coupling by the shift of the proton: alkyl 126, beside oxygen 143, aromatic and alkene 160, aldehyde 175.
 *
 * @param shiftPpm  of the proton
 * @returns Hz, within about 10 Hz
 * @source  common practice
 */
export function usualOneBondHz(shiftPpm: number): number {
  if (shiftPpm < 3) return 126;
  if (shiftPpm < 5.2) return 143;
  return shiftPpm < 9.2 ? 160 : 175;
}

/**
 * The lines of a proton signal with its 13C satellites: each line keeps 98.93 % and gives half of the rest to either side.
 *
 * @param lines      Hz from the signal's shift, shares summing to 1
 * @param oneBondHz  one-bond C-H coupling, Hz
 * @returns three times as many lines, by descending offset, shares summing to 1
 * @source  natural abundance of 13C; the small isotope shift is left out
 */
export function withCarbonSatellites(lines: readonly Line[], oneBondHz: number): Line[] {
  const half = Math.abs(oneBondHz) / 2;
  const all = lines.flatMap(({ offsetHz, share }) => [
    { offsetHz: offsetHz + half, share: (share * carbon13Share) / 2 },
    { offsetHz, share: share * (1 - carbon13Share) },
    { offsetHz: offsetHz - half, share: (share * carbon13Share) / 2 },
  ]);
  return all.sort((a, b) => b.offsetHz - a.offsetHz);
}
