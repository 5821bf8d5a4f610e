import { blockHamiltonian, loweringElement, type SpinBasis, type SpinBlock, spinBasis, stepsOf } from './spinBlocks.js';
import type { SpinSystem } from './spinSystem.js';
import { type SymmetricEigen, symmetricEigen } from './symmetricEigen.js';

/** Intensity, in nuclei, below which a transition is dropped: thousands of them add up to a millionth of one nucleus. */
const weakest = 1e-8;

/** Growing lists of transitions: parallel arrays, because there are thousands. */
export interface Transitions {
  readonly frequencyHz: number[];
  readonly intensity: number[];
  /** One list per signal: squared moment of that signal's nuclei alone, weighted as the intensity. */
  readonly own: readonly number[][];
}

/** One raising of the lowering operator: element (row, column) of one signal's operator between two blocks. */
interface Step {
  readonly row: number;
  readonly column: number;
  readonly signal: number;
  readonly element: number;
}

/**
 * Adds the transitions of one choice of total spins: eigenstates block by block, moments of the lowering operator between them.
 *
 * @param found        lists that are appended to
 * @param system       couplings, Hz
 * @param frequencyHz  shape (groups), Hz
 * @param twiceSpins   shape (groups), twice the total spin of each group
 * @param weight       factor of every intensity
 * @param signalOf     shape (groups), index of the signal a group belongs to
 */
export function addTransitions(
  found: Transitions,
  system: SpinSystem,
  frequencyHz: readonly number[],
  twiceSpins: readonly number[],
  weight: number,
  signalOf: readonly number[],
): void {
  const basis = spinBasis(twiceSpins);
  const solve = (block: SpinBlock) => symmetricEigen(blockHamiltonian(system, frequencyHz, basis, block), block.states.length);
  let upper = solve(basis.blocks[0]!);
  for (let depth = 0; depth + 1 < basis.blocks.length; depth++) {
    const lower = solve(basis.blocks[depth + 1]!);
    addBetween(found, upper, lower, steps(basis, depth, signalOf), weight);
    upper = lower;
  }
}

function steps(basis: SpinBasis, depth: number, signalOf: readonly number[]): Step[] {
  const lower = basis.blocks[depth + 1]!;
  return basis.blocks[depth]!.states.flatMap((code, column) =>
    basis.twiceSpins.flatMap((twice, group) => {
      const taken = stepsOf(basis, code, group);
      if (taken === twice) return [];
      const row = lower.rowOf.get(code + basis.stride[group]!)!;
      return [{ row, column, signal: signalOf[group]!, element: loweringElement(twice, taken) }];
    }),
  );
}

function addBetween(found: Transitions, upper: SymmetricEigen, lower: SymmetricEigen, lowering: readonly Step[], weight: number) {
  const n = upper.values.length;
  const p = lower.values.length;
  const signals = found.own.length;
  // Row 0 is the sum over signals, row 1 + s the part of signal s: most transitions are forbidden and need the sum alone.
  const lowered = new Float64Array((1 + signals) * p);
  for (let from = 0; from < n; from++) {
    lowered.fill(0);
    for (const { row, column, signal, element } of lowering) {
      const part = element * upper.vectors[from * n + column]!;
      lowered[row]! += part;
      lowered[(1 + signal) * p + row]! += part;
    }
    for (let to = 0; to < p; to++) {
      const moment = dot(lowered, 0, lower.vectors, to * p, p);
      if (weight * moment * moment < weakest) continue;
      found.frequencyHz.push(upper.values[from]! - lower.values[to]!);
      found.intensity.push(weight * moment * moment);
      for (let signal = 0; signal < signals; signal++) {
        const own = dot(lowered, (1 + signal) * p, lower.vectors, to * p, p);
        found.own[signal]!.push(weight * own * own);
      }
    }
  }
}

function dot(a: Float64Array, aStart: number, b: Float64Array, bStart: number, length: number): number {
  let sum = 0;
  for (let index = 0; index < length; index++) sum += a[aStart + index]! * b[bStart + index]!;
  return sum;
}
