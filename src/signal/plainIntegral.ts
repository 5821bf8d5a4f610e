import type { Spectrum } from '../spectrum/spectrum.js';

/**
 * Plain integral over a window with its standard uncertainty from correlated noise and the baseline level.
 *
 * @param lowPpm, highPpm limits; points whose place lies inside are summed
 * @returns area (units of the spectrum x Hz), its u, and the number of points
 * @source  u(I)^2 = sigma^2 dx^2 N (1 + 2 sum r(k)) + (u(b) N dx)^2 (derived; shared formulas, section 3)
 */
export function plainIntegral(spectrum: Spectrum, lowPpm: number, highPpm: number) {
  const { real, firstPpm, stepPpm, stepHz, noise, noiseCorrelation, baselineU } = spectrum;
  const from = Math.max(0, Math.ceil((firstPpm - highPpm) / stepPpm));
  const to = Math.min(real.length, Math.floor((firstPpm - lowPpm) / stepPpm) + 1);
  const count = Math.max(0, to - from);
  let sum = 0;
  for (let i = from; i < to; i += 1) sum += real[i]!;
  let inflation = 1;
  for (let lag = 1; lag < noiseCorrelation.length && lag < count; lag += 1) {
    inflation += 2 * noiseCorrelation[lag]! * (1 - lag / count);
  }
  const variance = noise * noise * count * Math.max(inflation, 0.05) + (baselineU * count) ** 2;
  return { area: sum * stepHz, u: Math.sqrt(variance) * stepHz, count };
}
