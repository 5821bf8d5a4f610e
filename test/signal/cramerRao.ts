/**
 * Cramer-Rao bound of the area of a multiplet of Lorentzian lines in a FID with white noise, when amplitude, shift, width and phase
 * are all unknown: the inverse of the Fisher information of s(t) = A e^{i phase} sum_l a_l exp(2 pi i f_l t - pi W t), summed
 * over the sampled points with finite differences of none, all derivatives analytic.
 *
 * @source S. M. Kay, Fundamentals of Statistical Signal Processing: Estimation Theory, chapter 3 (from memory): J = Re(D^H D) / sigma^2
 *         with sigma the noise of one channel.
 */
export function cramerRaoU(
  lines: readonly { readonly offsetHz: number; readonly share: number }[],
  settings: { area: number; widthHz: number; dwellS: number; points: number; fidNoise: number },
): number {
  const { area, widthHz, dwellS, points, fidNoise } = settings;
  const info = [0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0, 0];
  for (let k = 0; k < points; k += 1) {
    const t = k * dwellS;
    const decay = Math.exp(-Math.PI * widthHz * t);
    let re = 0;
    let im = 0;
    for (const { offsetHz, share } of lines) {
      re += share * decay * Math.cos(2 * Math.PI * offsetHz * t);
      im += share * decay * Math.sin(2 * Math.PI * offsetHz * t);
    }
    // d/dA, d/dphase = i A s, d/dshift = 2 pi i t A s, d/dW = -pi t A s.
    const columns: [number, number][] = [
      [re, im],
      [-area * im, area * re],
      [-area * im * 2 * Math.PI * t, area * re * 2 * Math.PI * t],
      [-area * Math.PI * t * re, -area * Math.PI * t * im],
    ];
    for (let i = 0; i < 4; i += 1) {
      for (let j = 0; j < 4; j += 1) {
        info[4 * i + j]! += (columns[i]![0] * columns[j]![0] + columns[i]![1] * columns[j]![1]) / fidNoise ** 2;
      }
    }
  }
  return Math.sqrt(inverseFirst(info));
}

/** Entry (0, 0) of the inverse of a 4 x 4 matrix, by Gauss and Jordan. */
function inverseFirst(matrix: readonly number[]): number {
  const rows = [0, 1, 2, 3].map((i) => [...matrix.slice(4 * i, 4 * i + 4), i === 0 ? 1 : 0]);
  for (let i = 0; i < 4; i += 1) {
    const pivot = rows[i]![i]!;
    rows[i] = rows[i]!.map((value) => value / pivot);
    for (let j = 0; j < 4; j += 1) {
      if (j === i) continue;
      const factor = rows[j]![i]!;
      rows[j] = rows[j]!.map((value, k) => value - factor * rows[i]![k]!);
    }
  }
  return rows[0]![4]!;
}
