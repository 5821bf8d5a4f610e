import type { Spectrum } from '../spectrum/spectrum.js';

/** A spectrum whose points are means of neighbours. */
export interface BinnedSpectrum extends Spectrum {
  /** How a bin blurs a line: the mean of P = 2 / z over a bin of b Hz is P - blur P^3 with blur = pi^2 b^2 / 12. */
  readonly blur: number;
  /** What the mean over a bin leaves of the ripple of a cut decay. */
  readonly rippleFactor: number;
}

/** Finer points than this part of the line width tell nothing more about a line. */
const pointsPerWidth = 6;
const binMax = 64;

/**
 * Averages neighbouring points where the spectrum is drawn much finer than its lines are wide. Nothing is lost: the mean over a
 * sixth of a line width weighs the late, noisy end of the decay down, and the model knows the blur.
 *
 * @param widthHz full width of the lines
 * @returns the same spectrum, or one with fewer points, its noise and correlation worked out
 * @source  second-order mean over a bin, f + b^2 f'' / 24 (derived); variance of a mean of correlated points (textbook)
 */
export function binSpectrum(spectrum: Spectrum, widthHz: number): BinnedSpectrum {
  const wanted = Math.min(binMax, Math.floor(widthHz / (pointsPerWidth * spectrum.stepHz)));
  // An even number of points cancels the ripple that twofold zero filling shows as plus and minus in turn.
  const size = wanted < 2 ? 1 : wanted - (wanted % 2);
  if (size === 1) return { ...spectrum, blur: 0, rippleFactor: 1 };
  const count = Math.floor(spectrum.real.length / size);
  const real = new Float64Array(count);
  for (let bin = 0; bin < count; bin += 1) {
    let sum = 0;
    for (let k = bin * size; k < (bin + 1) * size; k += 1) sum += spectrum.real[k]!;
    real[bin] = sum / size;
  }
  const widened = summedCorrelation(spectrum.noiseCorrelation, size);
  const binHz = size * spectrum.stepHz;
  const turn = Math.PI * spectrum.stepHz * (spectrum.acquisitionS ?? 0);
  const half = Math.sin(turn);
  const { imag: _, ...kept } = spectrum;
  return {
    ...kept,
    real,
    firstPpm: spectrum.firstPpm - ((size - 1) / 2) * spectrum.stepPpm,
    stepPpm: size * spectrum.stepPpm,
    stepHz: binHz,
    noise: (spectrum.noise * Math.sqrt(widened[0]!)) / size,
    noiseCorrelation: widened.map((value) => value / widened[0]!),
    blur: (Math.PI * binHz) ** 2 / 12,
    rippleFactor: Math.abs(half) < 1e-9 ? 1 : Math.sin(size * turn) / (size * half),
  };
}

/** Sum over i and j of r(k size + i - j): the covariance of two sums, k bins apart. */
function summedCorrelation(correlation: Float64Array, size: number): Float64Array {
  const bins = Math.ceil(correlation.length / size) + 1;
  const summed = Float64Array.from({ length: bins }, (_, bin) => {
    let sum = 0;
    for (let off = 1 - size; off < size; off += 1) {
      const lag = Math.abs(bin * size + off);
      sum += (size - Math.abs(off)) * (lag === 0 ? 1 : (correlation[lag] ?? 0));
    }
    return sum;
  });
  summed[0] = Math.max(summed[0]!, 1e-3 * size);
  return summed;
}
