import { spinCombinations } from './compositeSpins.js';
import type { SpinLines, SpinSystem } from './spinSystem.js';
import { addTransitions, type Transitions } from './spinTransitions.js';

/** Transitions closer than this are one line: a twentieth of the narrowest line met in a liquid. */
const sameLineHz = 0.01;

/**
 * The spectrum of coupled groups from the spin Hamiltonian, magnetically equivalent nuclei as composite spins, solved in
 * blocks of the total magnetic quantum number.
 *
 * @param system  groups (nuclei, Hz) and couplings (Hz)
 * @returns lines by descending frequency (Hz) with intensities that sum to the number of nuclei, and the squared transition
 *          moments of each signal's own nuclei, from which `shareLines` deals a mixed line out
 * @source  J. A. Pople, W. G. Schneider, H. J. Bernstein, High-Resolution NMR (1959); checked against the AB and ABX formulas and
 *          a plain NumPy diagonalisation (test/reference/pattern)
 */
export function solveSpinSystem(system: SpinSystem): SpinLines {
  const signals = [...new Set(system.groups.map((group) => group.signal))];
  const signalOf = system.groups.map((group) => signals.indexOf(group.signal));
  const nuclei = system.groups.map((group) => group.nuclei);
  // Energies relative to the middle of the system keep all digits for the small differences.
  const middleHz = system.groups.reduce((sum, group) => sum + group.frequencyHz, 0) / system.groups.length;
  const frequencyHz = system.groups.map((group) => group.frequencyHz - middleHz);
  const total = nuclei.reduce((sum, count) => sum + count, 0);
  const found: Transitions = { frequencyHz: [], intensity: [], own: signals.map(() => []) };
  for (const { twiceSpins, ways } of spinCombinations(nuclei)) {
    // The trace of F+F- over all states is nuclei x 2^(nuclei - 1); dividing by 2^(nuclei - 1) leaves the nuclei.
    addTransitions(found, system, frequencyHz, twiceSpins, ways / 2 ** (total - 1), signalOf);
  }
  return mergeTransitions(found, middleHz, signals);
}

function mergeTransitions(found: Transitions, middleHz: number, signals: readonly string[]): SpinLines {
  const order = Uint32Array.from(found.frequencyHz.keys()).sort((a, b) => found.frequencyHz[b]! - found.frequencyHz[a]! || a - b);
  const frequencyHz = new Float64Array(order.length);
  const intensity = new Float64Array(order.length);
  const ownMoments = new Float64Array(order.length * signals.length);
  let startHz = Number.POSITIVE_INFINITY;
  let line = -1;
  for (const index of order) {
    const atHz = found.frequencyHz[index]!;
    if (startHz - atHz > sameLineHz) {
      startHz = atHz;
      line++;
    }
    frequencyHz[line]! += atHz * found.intensity[index]!;
    intensity[line]! += found.intensity[index]!;
    for (let signal = 0; signal < signals.length; signal++) {
      ownMoments[line * signals.length + signal]! += found.own[signal]![index]!;
    }
  }
  const count = line + 1;
  for (let row = 0; row < count; row++) frequencyHz[row] = middleHz + frequencyHz[row]! / intensity[row]!;
  return {
    frequencyHz: frequencyHz.slice(0, count),
    intensity: intensity.slice(0, count),
    ownMoments: ownMoments.slice(0, count * signals.length),
    signals,
  };
}
