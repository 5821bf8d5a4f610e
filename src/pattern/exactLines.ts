import type { Line } from './pattern.js';
import { shareLines } from './shareLines.js';
import { solveSpinSystem } from './solveSpinSystem.js';
import type { SpinSystem } from './spinSystem.js';

const cache = new Map<string, ReadonlyMap<string, readonly Line[]>>();
const cacheMax = 400;

/** States in the largest choice of total spins; about 400 take a tenth of a second. */
const statesMax = 400;

/** Whether a system is small enough to be solved while someone waits. */
export function isSolvable(nucleiOfGroups: readonly number[]): boolean {
  return nucleiOfGroups.reduce((states, nuclei) => states * (nuclei + 1), 1) <= statesMax;
}

/**
 * The exact lines of every signal of a coupled system. Results are kept, so a run that asks at one field solves once.
 *
 * @param system  groups (nuclei, Hz) and couplings (Hz)
 * @returns signal -> lines, Hz from the mean frequency of the signal's groups, descending, shares summing to 1
 * @source  see `solveSpinSystem` and `shareLines`
 */
export function exactLines(system: SpinSystem): ReadonlyMap<string, readonly Line[]> {
  const key = JSON.stringify([system.groups.map((group) => [group.signal, group.nuclei, group.frequencyHz]), system.couplingsHz]);
  const known = cache.get(key);
  if (known !== undefined) return known;
  const nuclei = new Map<string, number>();
  const moments = new Map<string, number>();
  for (const group of system.groups) {
    nuclei.set(group.signal, (nuclei.get(group.signal) ?? 0) + group.nuclei);
    moments.set(group.signal, (moments.get(group.signal) ?? 0) + group.nuclei * group.frequencyHz);
  }
  const centreHz = new Map([...moments].map(([signal, moment]) => [signal, moment / nuclei.get(signal)!]));
  const lines = shareLines(solveSpinSystem(system), nuclei, centreHz);
  if (cache.size >= cacheMax) cache.delete(cache.keys().next().value!);
  cache.set(key, lines);
  return lines;
}
