import type { Method } from '../method/method.js';
import type { FidLine } from './synthesizeFid.js';

/**
 * The line that pins the ppm scale of a simulated spectrum, when the method names one that is not a species' signal.
 *
 * @returns one line at the stated or usual shift; none when a species carries the reference
 * @source common practice: tetramethylsilane and its water-soluble relatives define 0; HDO 4.79 ppm at 25 degrees C
 */
export function referenceLines(method: Method, widthHz: number): FidLine[] {
  const { signal, shiftPpm } = method.reference;
  if (signal.includes('/')) return [];
  const usualPpm = signal === 'HDO' ? 4.79 : signal === 'solvent' ? residualShiftPpm(method.solvent) : 0;
  return [{ shiftPpm: shiftPpm ?? usualPpm, area: 0.5, widthHz }];
}

/** Fulmer et al., Organometallics 2010, 29, 2176, Table 1 (as published). */
function residualShiftPpm(solvent: string | undefined): number {
  const shifts: Record<string, number> = {
    CDCl3: 7.26,
    CD2Cl2: 5.32,
    'DMSO-d6': 2.5,
    'acetone-d6': 2.05,
    CD3CN: 1.94,
    CD3OD: 3.31,
    D2O: 4.79,
    C6D6: 7.16,
  };
  return (solvent !== undefined ? shifts[solvent] : undefined) ?? 7.26;
}
