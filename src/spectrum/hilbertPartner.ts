import { fastFourier, inverseFourier, powerOfTwoFrom } from './fastFourier.js';

/**
 * The dispersive partner of a real spectrum by the Hilbert transform (through the time domain: a spectrum of a one-sided signal).
 *
 * @param real shape (n), lowest frequency first
 * @returns shape (n): with it, real + i imag is the transform of a signal that is zero before time zero
 * @source Kramers-Kronig relation; checked against scipy.signal.hilbert
 */
export function hilbertPartner(real: Float64Array): Float64Array {
  const n = powerOfTwoFrom(real.length);
  const data = new Float64Array(2 * n);
  for (let i = 0; i < real.length; i += 1) data[2 * i] = real[i]!;
  const time = inverseFourier(data);
  for (let k = 0; k < n; k += 1) {
    const weight = k === 0 || k === n / 2 ? 1 : k < n / 2 ? 2 : 0;
    time[2 * k] = time[2 * k]! * weight;
    time[2 * k + 1] = time[2 * k + 1]! * weight;
  }
  const back = fastFourier(time);
  return Float64Array.from({ length: real.length }, (_, i) => back[2 * i + 1]!);
}
