import { expectedLines } from '../method/expectedLines.js';
import type { Method } from '../method/method.js';
import { referenceSubstances } from '../method/referenceSubstances.js';
import type { Line } from '../pattern/pattern.js';
import { trinomialLines } from '../pattern/trinomialLines.js';
import { residualSignals } from './residualSignals.js';

/** A place where a line may be expected, and why. */
export interface Expectation {
  readonly name: string;
  readonly shiftPpm: number;
  readonly lines: readonly Line[];
  /** How surely it is there: 1 for what the sample must hold, less for what comes and goes. */
  readonly sureness: number;
  readonly kind: 'reference' | 'solvent' | 'water' | 'signal';
}

/**
 * Everything that the method and the solvent lead to expect in the spectrum: signals of the species, the reference, the residual
 * signal of the deuterated solvent, water.
 *
 * @param observeMhz field of the file, for the patterns
 */
export function expectationsOf(method: Method, observeMhz: number): Expectation[] {
  const list: Expectation[] = [];
  for (const species of method.species) {
    const patterns = expectedLines(species, observeMhz);
    const sureness = species.role === 'internal-standard' || species.role === 'solvent' ? 1 : 0.6;
    for (const signal of species.signals) {
      const lines = patterns.get(signal.id) ?? [{ offsetHz: 0, share: 1 }];
      list.push({ name: signal.key, shiftPpm: signal.shiftPpm, lines, sureness: signal.moves ? 0.2 : sureness, kind: 'signal' });
    }
  }
  const residual = method.nucleus === '1H' && method.solvent !== undefined ? residualSignals[method.solvent] : undefined;
  for (const { shiftPpm, deuterons, couplingHz } of residual?.signals ?? []) {
    list.push({ name: 'solvent', shiftPpm, lines: trinomialLines(deuterons, couplingHz), sureness: 0.9, kind: 'solvent' });
  }
  if (residual?.waterPpm !== undefined)
    list.push({ name: 'water', shiftPpm: residual.waterPpm, lines: [{ offsetHz: 0, share: 1 }], sureness: 0.3, kind: 'water' });
  const named = referenceOf(method);
  return named ? [...list, named] : list;
}

/** The method's reference as an expectation; undefined when it is a signal or the solvent, which are listed already. */
function referenceOf(method: Method): Expectation | undefined {
  const { signal, shiftPpm } = method.reference;
  const substance = referenceSubstances[signal];
  if (!substance) return undefined;
  return {
    name: signal,
    shiftPpm: shiftPpm ?? substance.shiftPpm,
    lines: [{ offsetHz: 0, share: 1 }],
    sureness: 1,
    kind: 'reference',
  };
}
