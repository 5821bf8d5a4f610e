import { firstOrderLines } from '../pattern/firstOrderLines.js';
import type { Line } from '../pattern/pattern.js';
import type { MethodSpecies } from './method.js';

/**
 * The lines that every signal of a species should show at a field.
 *
 * @param species     as read from the method
 * @param observeMhz  MHz of the observed nucleus
 * @returns signal id -> lines, Hz from the signal's shift, shares summing to 1; empty when none are declared (`m`)
 */
export function expectedLines(species: MethodSpecies, observeMhz: number): ReadonlyMap<string, readonly Line[]> {
  void observeMhz;
  return new Map(species.signals.map((signal) => [signal.id, firstOrderLines(signal.pattern)]));
}
