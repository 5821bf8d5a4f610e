import type { ComplexSpectrum } from './complexSpectrum.js';
import { fillLineColumns, type GroupFit, type SlopeOf } from './fitGroup.js';

/**
 * Takes fitted lines out of a spectrum, tails and all.
 *
 * @param spectrum shape (n), not phased
 * @param fits     groups to take out
 * @param slope    the first-order phase they were fitted under
 * @returns a new spectrum
 * @source the model of `fitGroup`
 */
export function subtractLines(spectrum: ComplexSpectrum, fits: readonly GroupFit[], slope: SlopeOf): ComplexSpectrum {
  const real = Float64Array.from(spectrum.real);
  const imag = Float64Array.from(spectrum.imag);
  for (const { columns, coefficients, index, phaseRad } of fits) {
    const turns = columns.map(({ peak }) => (slope.turnsThrough ? 0 : slope.step * (peak.index - index)));
    const [re, im] = [new Float64Array(columns.length), new Float64Array(columns.length)];
    const step = slope.turnsThrough ? slope.step : 0;
    for (let i = 0; i < real.length; i += 1) {
      fillLineColumns(columns, turns, i, re, im);
      let [x, y] = [0, 0];
      for (let k = 0; k < columns.length; k += 1) {
        x += coefficients[k]! * re[k]!;
        y += coefficients[k]! * im[k]!;
      }
      const angle = phaseRad + step * (i - index);
      const [c, s] = [Math.cos(angle), Math.sin(angle)];
      real[i] = real[i]! - (x * c - y * s);
      imag[i] = imag[i]! - (x * s + y * c);
    }
  }
  return { real, imag, stepHz: spectrum.stepHz };
}
