import type { Method, MethodSignal, MethodSpecies } from '../../src/method/method.js';
import { parseListed } from '../../src/pattern/parseListed.js';

/** A method literal: defaults for everything that a test does not care about. */
export function buildMethod(partial: Partial<Method> = {}): Method {
  return {
    title: 'test method',
    version: '1',
    sha256: 'f'.repeat(64),
    nucleus: '1H',
    reference: { signal: 'tetramethylsilane', shiftPpm: 0 },
    species: [],
    limits: [],
    processing: { lineBroadeningHz: 0, zeroFilling: 2, phase: 'automatic', baseline: 'automatic' },
    acquisition: {},
    kinetics: {},
    quality: {},
    input: {},
    ...partial,
  };
}

/** A species from listed signals: `buildSpecies('ester', {OCH2: '4.12 (q, J = 7.1 Hz, 2H)'})`. */
export function buildSpecies(
  id: string,
  listed: Readonly<Record<string, string>>,
  partial: Partial<MethodSpecies> = {},
  signalPartial: Partial<MethodSignal> = {},
): MethodSpecies {
  const signals = Object.entries(listed).map(([signalId, text]): MethodSignal => {
    const parsed = parseListed(text);
    if (!parsed.ok) throw new Error(parsed.problem.message);
    const { shiftPpm, rangePpm, pattern, nuclei } = parsed.value;
    return {
      id: signalId,
      key: `${id}/${signalId}`,
      shiftPpm,
      ...(rangePpm !== undefined ? { rangePpm } : {}),
      withinPpm: 0.05,
      pattern,
      nuclei: nuclei ?? 1,
      use: 'quantify',
      moves: false,
      ...signalPartial,
    };
  });
  return { id, name: id, role: 'product', stoichiometry: 1, signals, ...partial };
}
