import type { ComplexSpectrum } from './complexSpectrum.js';
import { fastFourier, powerOfTwoFrom } from './fastFourier.js';

/**
 * Windows, lengthens and transforms a FID. The points before the onset are kept as negative time, so that nothing of the signal is
 * lost and no large first-order phase arises.
 *
 * @param real   shape (n)
 * @param imag   shape (n)
 * @param dwellS seconds between points
 * @param settings onset in whole points, line broadening in Hz, zero filling as a factor
 * @returns spectrum whose real part, in phase, has the sum x stepHz of the FID's amplitude at time zero
 * @source Fourier pair of exp(-pi W t); first point halved as the trapezoid rule asks (Otting et al., J. Magn. Reson. 1986, 66, 187)
 */
export function transformFid(
  real: Float64Array,
  imag: Float64Array,
  dwellS: number,
  settings: {
    readonly onsetPoints: number;
    readonly lineBroadeningHz: number;
    readonly zeroFilling: number;
    readonly keepsEarly: boolean;
  },
): ComplexSpectrum {
  const { onsetPoints, lineBroadeningHz, zeroFilling, keepsEarly: early } = settings;
  const kept = real.length - onsetPoints;
  const n = powerOfTwoFrom(Math.max(real.length, kept * zeroFilling));
  const data = new Float64Array(2 * n);
  const step = Math.exp(-Math.PI * lineBroadeningHz * dwellS);
  let window = 2 * dwellS;
  for (let k = 0; k < kept; k += 1) {
    const half = k === 0 && onsetPoints === 0 ? 0.5 : 1;
    data[2 * k] = half * window * real[k + onsetPoints]!;
    data[2 * k + 1] = half * window * imag[k + onsetPoints]!;
    window *= step;
  }
  if (onsetPoints > 0 && !early) halveFirst(data);
  if (early) {
    for (let k = 0; k < onsetPoints; k += 1) {
      const place = n - onsetPoints + k;
      data[2 * place] = 2 * dwellS * real[k]!;
      data[2 * place + 1] = 2 * dwellS * imag[k]!;
    }
  }
  return centred(fastFourier(data), n, 1 / (n * dwellS));
}

/**
 * Whether the points before the onset hold the build-up of a digital filter, or only noise.
 *
 * @param onsetPoints whole points before the onset
 */
export function buildsUp(real: Float64Array, imag: Float64Array, onsetPoints: number): boolean {
  if (onsetPoints < 6) return false;
  const energy = (from: number, to: number) => {
    let sum = 0;
    for (let k = from; k < to; k += 1) sum += real[k]! ** 2 + imag[k]! ** 2;
    return sum / Math.max(1, to - from);
  };
  return energy(onsetPoints - 4, onsetPoints) > 9 * energy(0, Math.max(1, onsetPoints - 30)) + 1e-30;
}

function halveFirst(data: Float64Array): void {
  data[0] = data[0]! / 2;
  data[1] = data[1]! / 2;
}

function centred(transformed: Float64Array, n: number, stepHz: number): ComplexSpectrum {
  const real = new Float64Array(n);
  const imag = new Float64Array(n);
  const half = n / 2;
  for (let i = 0; i < n; i += 1) {
    const from = (i + half) % n;
    real[i] = transformed[2 * from]!;
    imag[i] = transformed[2 * from + 1]!;
  }
  return { real, imag, stepHz };
}
