import FFT from 'fft.js';

const plans = new Map<number, FFT>();

function planOf(n: number): FFT {
  const known = plans.get(n);
  if (known) return known;
  const plan = new FFT(n);
  plans.set(n, plan);
  return plan;
}

/**
 * Complex discrete Fourier transform of interleaved data, sum of x exp(-2 pi i j k / n).
 *
 * @param interleaved shape (2n): real, imaginary, real ...; n a power of two
 * @returns shape (2n), interleaved, not scaled
 * @source fft.js (MIT); checked against numpy.fft
 */
export function fastFourier(interleaved: Float64Array): Float64Array {
  const output = new Float64Array(interleaved.length);
  planOf(interleaved.length / 2).transform(output as unknown as number[], interleaved as unknown as number[]);
  return output;
}

/** Inverse of `fastFourier`, scaled by 1/n. */
export function inverseFourier(interleaved: Float64Array): Float64Array {
  const output = new Float64Array(interleaved.length);
  planOf(interleaved.length / 2).inverseTransform(output as unknown as number[], interleaved as unknown as number[]);
  return output;
}

/** The least power of two that is not below n. */
export function powerOfTwoFrom(n: number): number {
  return 2 ** Math.ceil(Math.log2(Math.max(2, n)));
}
