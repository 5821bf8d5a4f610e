/** One total spin that n equivalent spin-1/2 nuclei can form. */
export interface CompositeSpin {
  /** Twice the total spin: a whole number. */
  readonly twiceSpin: number;
  /** How many ways the nuclei form it. */
  readonly ways: number;
}

/**
 * The total spins of n equivalent spin-1/2 nuclei, n/2 downwards, each with its number of ways C(n, k) - C(n, k - 1).
 *
 * @param nuclei  number of equivalent nuclei
 * @returns shape (floor(n / 2) + 1); the states (2I + 1) x ways sum to 2^n
 * @source  Clebsch-Gordan series; J. A. Pople, W. G. Schneider, H. J. Bernstein, High-Resolution NMR (1959) (from memory)
 */
export function compositeSpins(nuclei: number): CompositeSpin[] {
  const spins: CompositeSpin[] = [];
  let choose = 1;
  let before = 0;
  for (let k = 0; 2 * k <= nuclei; k++) {
    spins.push({ twiceSpin: nuclei - 2 * k, ways: choose - before });
    before = choose;
    choose = (choose * (nuclei - k)) / (k + 1);
  }
  return spins;
}

/** Every choice of one total spin per group, with the product of its ways. */
export function spinCombinations(nuclei: readonly number[]): { readonly twiceSpins: readonly number[]; readonly ways: number }[] {
  let all: { twiceSpins: readonly number[]; ways: number }[] = [{ twiceSpins: [], ways: 1 }];
  for (const count of nuclei) {
    const spins = compositeSpins(count);
    all = all.flatMap(({ twiceSpins, ways }) =>
      spins.map((spin) => ({ twiceSpins: [...twiceSpins, spin.twiceSpin], ways: ways * spin.ways })),
    );
  }
  return all;
}
