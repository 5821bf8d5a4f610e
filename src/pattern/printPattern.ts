import type { Pattern } from './pattern.js';

/** A coupling as printed: to a tenth of a hertz as is usual, or as finely as it was given. */
export function printHertz(couplingHz: number): string {
  const rounded = Math.round(couplingHz * 100) / 100;
  return Number.isInteger(Math.round(rounded * 1000) / 100) ? rounded.toFixed(1) : String(rounded);
}

/**
 * Prints a pattern in the usual form: `dd, J = 15.9, 6.7 Hz`.
 *
 * @param pattern  as parsed or computed
 * @returns text that `parseListed` reads back; couplings to 0.01 Hz at most; without couplings the letters alone
 * @source  common practice
 */
export function printPattern(pattern: Pattern): string {
  const couplings = pattern.splittings.flatMap(({ couplingHz }) => (couplingHz === undefined ? [] : [printHertz(couplingHz)]));
  return couplings.length === 0 ? pattern.text : `${pattern.text}, J = ${couplings.join(', ')} Hz`;
}
