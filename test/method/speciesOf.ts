import type { MethodSignal, MethodSpecies } from '../../src/method/method.js';
import { parseListed } from '../../src/pattern/parseListed.js';

export type Entry =
  | string
  | { readonly listed: string; readonly coupled?: Readonly<Record<string, number>>; readonly cross?: readonly number[] };

/** A species from listed signals, for tests: `speciesOf({CH3: '1.25 (t, J = 7.1 Hz, 3H)'})`. */
export function speciesOf(entries: Readonly<Record<string, Entry>>, facts: Partial<MethodSpecies> = {}): MethodSpecies {
  const signals = Object.entries(entries).map(([id, entry]): MethodSignal => {
    const { listed, coupled, cross } =
      typeof entry === 'string' ? { listed: entry, coupled: undefined, cross: undefined } : entry;
    const parsed = parseListed(listed);
    if (!parsed.ok) throw new Error(parsed.problem.message);
    const { shiftPpm, rangePpm, pattern, nuclei } = parsed.value;
    return {
      id,
      key: `${facts.id ?? 'species'}/${id}`,
      shiftPpm,
      ...(rangePpm !== undefined ? { rangePpm } : {}),
      withinPpm: 0.05,
      pattern,
      nuclei,
      use: 'quantify',
      moves: false,
      ...(coupled !== undefined ? { coupled } : {}),
      ...(cross !== undefined ? { crossCouplingsHz: cross } : {}),
    };
  });
  return { id: 'species', name: 'Species', role: 'product', stoichiometry: 1, ...facts, signals };
}
