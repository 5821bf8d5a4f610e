import type { ComplexSpectrum } from './complexSpectrum.js';
import type { GroupFit, SlopeOf } from './fitGroup.js';

/** Beyond this many half widths the higher powers of the Lorentzian are below 1e-4 of the first. */
const farWidths = 100;

/**
 * Takes fitted lines out of a spectrum, tails and all.
 *
 * @param spectrum shape (n), not phased
 * @param fits     groups to take out
 * @param slope    the first-order phase they were fitted under
 * @returns a new spectrum
 * @source the model of `fitGroup`, summed as a polynomial in L
 */
export function subtractLines(spectrum: ComplexSpectrum, fits: readonly GroupFit[], slope: SlopeOf): ComplexSpectrum {
  const real = Float64Array.from(spectrum.real);
  const imag = Float64Array.from(spectrum.imag);
  for (const fit of fits) {
    for (const line of linesOf(fit, slope)) {
      const step = slope.turnsThrough ? slope.step : 0;
      takeOut(real, imag, line, -fit.index * step, step);
    }
  }
  return { real, imag, stepHz: spectrum.stepHz };
}

interface Polynomial {
  readonly index: number;
  readonly half: number;
  /** Complex coefficients of L, L^2, L^3: real, imaginary, real ... */
  readonly powers: Float64Array;
}

function linesOf({ columns, coefficients, phaseRad, index }: GroupFit, slope: SlopeOf): Polynomial[] {
  const byPeak = new Map<unknown, Polynomial>();
  columns.forEach(({ peak, power, isTurned }, k) => {
    const known = byPeak.get(peak);
    const line = known ?? { index: peak.index, half: peak.widthPoints / 2, powers: new Float64Array(6) };
    if (!known) byPeak.set(peak, line);
    const turn = phaseRad + (slope.turnsThrough ? 0 : slope.step * (peak.index - index)) + (isTurned ? Math.PI / 2 : 0);
    const at = 2 * (power - 1);
    line.powers[at] = line.powers[at]! + coefficients[k]! * Math.cos(turn);
    line.powers[at + 1] = line.powers[at + 1]! + coefficients[k]! * Math.sin(turn);
  });
  return [...byPeak.values()];
}

function takeOut(real: Float64Array, imag: Float64Array, line: Polynomial, startRad: number, step: number): void {
  const { index, half, powers } = line;
  const [r1, i1, r2, i2, r3, i3] = [powers[0]!, powers[1]!, powers[2]!, powers[3]!, powers[4]!, powers[5]!];
  let c = Math.cos(startRad);
  let s = Math.sin(startRad);
  const dc = Math.cos(step);
  const ds = Math.sin(step);
  for (let i = 0; i < real.length; i += 1) {
    const distance = i - index;
    const scale = half / (half * half + distance * distance);
    const lr = half * scale;
    const li = -distance * scale;
    let pr = r1;
    let pi = i1;
    if (Math.abs(distance) < farWidths * half) {
      const qr = r2 + r3 * lr - i3 * li;
      const qi = i2 + r3 * li + i3 * lr;
      pr += qr * lr - qi * li;
      pi += qr * li + qi * lr;
    }
    const x = pr * lr - pi * li;
    const y = pr * li + pi * lr;
    real[i] = real[i]! - (x * c - y * s);
    imag[i] = imag[i]! - (x * s + y * c);
    const next = c * dc - s * ds;
    s = c * ds + s * dc;
    c = next;
  }
}
