import type { SpinSystem } from './spinSystem.js';

/** The product states of one total magnetic quantum number. */
export interface SpinBlock {
  /** Codes of the states (see `SpinBasis.stride`), ascending. */
  readonly states: readonly number[];
  /** state code -> row of the block */
  readonly rowOf: ReadonlyMap<number, number>;
}

/** Product states of one choice of total spins, in blocks of falling total magnetic quantum number. */
export interface SpinBasis {
  readonly twiceSpins: readonly number[];
  /** A state is coded as the sum of (steps below the top of each group) x stride. */
  readonly stride: readonly number[];
  readonly blocks: readonly SpinBlock[];
}

/** Lists the product states of composite spins, grouped by how many steps they lie below the top state. */
export function spinBasis(twiceSpins: readonly number[]): SpinBasis {
  const stride: number[] = [];
  let size = 1;
  for (const twice of twiceSpins) {
    stride.push(size);
    size *= twice + 1;
  }
  const depth = twiceSpins.reduce((sum, twice) => sum + twice, 0);
  const lists: number[][] = Array.from({ length: depth + 1 }, () => []);
  for (let code = 0; code < size; code++) {
    let steps = 0;
    for (const [group, twice] of twiceSpins.entries()) steps += Math.floor(code / stride[group]!) % (twice + 1);
    lists[steps]!.push(code);
  }
  const blocks = lists.map((states) => ({ states, rowOf: new Map(states.map((code, row) => [code, row])) }));
  return { twiceSpins, stride, blocks };
}

/** Steps below the top of one group in a state. */
export function stepsOf(basis: SpinBasis, code: number, group: number): number {
  return Math.floor(code / basis.stride[group]!) % (basis.twiceSpins[group]! + 1);
}

/** Matrix element of the lowering operator of one group: sqrt((I + m)(I - m + 1)) with m = I - steps. */
export function loweringElement(twiceSpin: number, steps: number): number {
  return Math.sqrt((twiceSpin - steps) * (steps + 1));
}

/**
 * The spin Hamiltonian within one block: sum of frequency x Iz and of J x I.I over pairs of groups.
 *
 * @param system       couplings, shape (groups x groups), Hz
 * @param frequencyHz  shape (groups), Hz, on any common scale
 * @returns shape (n x n) row by row, Hz, symmetric
 * @source  J. A. Pople, W. G. Schneider, H. J. Bernstein, High-Resolution NMR (1959) (from memory)
 */
export function blockHamiltonian(system: SpinSystem, frequencyHz: readonly number[], basis: SpinBasis, block: SpinBlock) {
  const groups = basis.twiceSpins.length;
  const n = block.states.length;
  const matrix = new Float64Array(n * n);
  const steps = new Array<number>(groups).fill(0);
  for (const [row, code] of block.states.entries()) {
    for (let group = 0; group < groups; group++) steps[group] = stepsOf(basis, code, group);
    let energy = 0;
    for (let a = 0; a < groups; a++) {
      const m = basis.twiceSpins[a]! / 2 - steps[a]!;
      energy += frequencyHz[a]! * m;
      for (let b = 0; b < groups; b++) {
        const coupling = a === b ? 0 : system.couplingsHz[a]![b]!;
        if (coupling === 0) continue;
        if (b > a) energy += coupling * m * (basis.twiceSpins[b]! / 2 - steps[b]!);
        // Group a one step down, group b one step up; the mirror element comes from the pair (b, a).
        if (steps[a]! === basis.twiceSpins[a]! || steps[b]! === 0) continue;
        const other = block.rowOf.get(code + basis.stride[a]! - basis.stride[b]!)!;
        const down = loweringElement(basis.twiceSpins[a]!, steps[a]!);
        const up = loweringElement(basis.twiceSpins[b]!, steps[b]! - 1);
        matrix[other * n + row]! += (coupling / 2) * down * up;
      }
    }
    matrix[row * n + row]! += energy;
  }
  return matrix;
}
