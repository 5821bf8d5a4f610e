/** A seeded source of numbers: the same seed gives the same sequence on every machine. */
export interface Random {
  /** Uniform in [0, 1). */
  uniform(): number;
  /** Uniform in [low, high). */
  between(low: number, high: number): number;
  /** Standard normal. */
  normal(): number;
  /** Whole number in [low, high]. */
  integer(low: number, high: number): number;
}

/**
 * Makes a seeded generator (sfc32 seeded through splitmix32; normals by Box and Muller).
 *
 * @source Doty-Humphrey, PractRand (sfc32); Box, Muller, Ann. Math. Stat. 1958, 29, 610
 */
export function makeRandom(seed: number): Random {
  let a = mix(seed);
  let b = mix(a);
  let c = mix(b);
  let counter = 1;
  let spare: number | undefined;
  function next(): number {
    const t = (a + b + counter) | 0;
    counter = (counter + 1) | 0;
    a = b ^ (b >>> 9);
    b = (c + (c << 3)) | 0;
    c = (c << 21) | (c >>> 11);
    c = (c + t) | 0;
    return t >>> 0;
  }
  for (let warm = 0; warm < 12; warm += 1) next();
  const uniform = () => (next() * 2 ** 21 + (next() >>> 11)) / 2 ** 53;
  return {
    uniform,
    between: (low, high) => low + (high - low) * uniform(),
    integer: (low, high) => low + Math.floor((high - low + 1) * uniform()),
    normal() {
      if (spare !== undefined) {
        const value = spare;
        spare = undefined;
        return value;
      }
      const radius = Math.sqrt(-2 * Math.log(1 - uniform()));
      const angle = 2 * Math.PI * uniform();
      spare = radius * Math.sin(angle);
      return radius * Math.cos(angle);
    },
  };
}

function mix(value: number): number {
  let z = (value + 0x9e3779b9) | 0;
  z = Math.imul(z ^ (z >>> 16), 0x21f0aaad);
  z = Math.imul(z ^ (z >>> 15), 0x735a2d97);
  return (z ^ (z >>> 15)) | 0;
}
