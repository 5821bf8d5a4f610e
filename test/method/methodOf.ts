import type { Method, MethodSpecies } from '../../src/method/method.js';

/** A method with plain defaults around the species of a test. */
export function methodOf(species: readonly MethodSpecies[]): Method {
  return {
    title: 'Esterification',
    version: '1',
    sha256: '0'.repeat(64),
    nucleus: '1H',
    solvent: 'CDCl3',
    reference: { signal: 'tetramethylsilane', shiftPpm: 0 },
    species,
    limits: [],
    processing: { lineBroadeningHz: 'matched', zeroFilling: 2, phase: 'automatic', baseline: 'automatic' },
    acquisition: {},
    kinetics: {},
    quality: {},
    input: {},
  };
}
