import type { ComplexSpectrum } from './complexSpectrum.js';
import type { Peak } from './findPeaks.js';

/** Points that the criterion looks at: enough to hold every strong line, few enough to be quick. */
const pointsMax = 9000;
const evaluationsMax = 70;

interface Window {
  /** shape (m): real and imaginary parts, scaled to a largest magnitude of 1 */
  readonly real: Float64Array;
  readonly imag: Float64Array;
  /** Place of the first point, -0.5 to 0.5, and the step. */
  readonly first: number;
  readonly step: number;
  readonly weight: number;
}

/**
 * Refines a phase by the entropy of the slope of the real part, window by window: in absorption a line's slope is gathered in the
 * fewest points. Each window counts alike, so that one strong line does not decide for the whole spectrum.
 *
 * @param spectrum not phased, shape (n)
 * @param peaks    maxima, strongest first
 * @param noise    rms of one quadrature
 * @param start    zero and first order found before, radians
 * @param firstReachRad how far the first order may move
 * @returns refined angles, radians
 * @source Chen, Weng, Goh, Garland, J. Magn. Reson. 2002, 158, 164 (m = 1); simplex: Nelder, Mead, Comput. J. 1965, 7, 308
 */
export function refinePhase(
  spectrum: ComplexSpectrum,
  peaks: readonly Peak[],
  noise: number,
  start: { readonly zeroRad: number; readonly firstRad: number },
  firstReachRad: number,
): { zeroRad: number; firstRad: number } {
  const windows = windowsOf(spectrum, peaks, noise);
  if (windows.length === 0) return start;
  // Turning about the strongest window keeps the two angles nearly independent.
  const pivot = windows[0]!.first;
  const span = Math.max(0.02, Math.max(...windows.map(({ first }) => Math.abs(first - pivot))));
  const at = (a: number, b: number) => {
    const firstRad = start.firstRad + b / span;
    return { firstRad, zeroRad: start.zeroRad + a - (firstRad - start.firstRad) * pivot };
  };
  const cost = (a: number, b: number) => {
    const { zeroRad, firstRad } = at(a, b);
    const beyond = Math.max(0, Math.abs(firstRad - start.firstRad) - firstReachRad);
    let sum = beyond * beyond;
    for (const window of windows) sum += window.weight * entropyOf(window, zeroRad, firstRad);
    return sum;
  };
  const begin = scan(cost, firstReachRad * span, windows.length > 1);
  const [a, b] = simplex((da, db) => cost(begin[0] + da, begin[1] + db), 0.06, windows.length > 1 ? 0.06 : 0);
  return at(begin[0] + a, begin[1] + b);
}

/** A coarse look around: crowded spectra have side minima. */
function scan(cost: (a: number, b: number) => number, reach: number, hasSlope: boolean): [number, number] {
  let best: [number, number] = [0, 0];
  let least = cost(0, 0);
  const steps = hasSlope ? Math.min(12, Math.ceil(reach / 0.12)) : 0;
  for (let k = -steps; k <= steps; k += 1) {
    for (const a of [-0.3, -0.15, 0, 0.15, 0.3]) {
      const b = steps > 0 ? (reach * k) / steps : 0;
      const value = cost(a, b);
      if (value < least) [least, best] = [value, [a, b]];
    }
  }
  return best;
}

function windowsOf({ real, imag }: ComplexSpectrum, peaks: readonly Peak[], noise: number): Window[] {
  const n = real.length;
  const used = new Uint8Array(n);
  const windows: Window[] = [];
  let total = 0;
  for (const { index, widthPoints, magnitude } of peaks) {
    if (magnitude < 25 * noise) break;
    const middle = Math.round(index);
    if (used[middle] === 1) continue;
    const reach = Math.ceil(Math.max(12, 14 * widthPoints));
    const [from, to] = [Math.max(0, middle - reach), Math.min(n - 1, middle + reach)];
    total += to - from + 1;
    if (total > pointsMax && windows.length >= 3) break;
    used.fill(1, from, to + 1);
    windows.push({
      real: real.subarray(from, to + 1).map((value) => value / magnitude),
      imag: imag.subarray(from, to + 1).map((value) => value / magnitude),
      first: from / n - 0.5,
      step: 1 / n,
      // Weak lines have much of their slope in the noise.
      weight: 1 / (1 + (60 * noise) / magnitude),
    });
    if (windows.length >= 24) break;
  }
  return windows;
}

/** Entropy of the shares of |R(i+1) - R(i)|, with a penalty on negative points. */
function entropyOf({ real, imag, first, step }: Window, zeroRad: number, firstRad: number): number {
  let angle = -(zeroRad + firstRad * first);
  let [c, s] = [Math.cos(angle), Math.sin(angle)];
  angle = -firstRad * step;
  const [dc, ds] = [Math.cos(angle), Math.sin(angle)];
  let [sum, sumLog, negative, before] = [0, 0, 0, 0];
  for (let i = 0; i < real.length; i += 1) {
    const value = real[i]! * c - imag[i]! * s;
    if (i > 0) {
      const slope = Math.abs(value - before);
      if (slope > 1e-12) {
        sum += slope;
        sumLog += slope * Math.log(slope);
      }
    }
    if (value < 0) negative += value * value;
    before = value;
    const next = c * dc - s * ds;
    s = c * ds + s * dc;
    c = next;
  }
  return sum > 0 ? Math.log(sum) - sumLog / sum + 2 * negative : 0;
}

function simplex(cost: (a: number, b: number) => number, stepA: number, stepB: number): [number, number] {
  if (stepB === 0) return [simplexLine((a) => cost(a, 0), stepA), 0];
  const make = (a: number, b: number) => ({ a, b, y: cost(a, b) });
  const corners = [make(0, 0), make(stepA, 0), make(0, stepB)];
  for (let count = 3; count < evaluationsMax; ) {
    corners.sort((p, q) => p.y - q.y);
    const [best, middle, worst] = [corners[0]!, corners[1]!, corners[2]!];
    if (Math.abs(worst.a - best.a) + Math.abs(worst.b - best.b) < 4e-4) break;
    const [ca, cb] = [(best.a + middle.a) / 2, (best.b + middle.b) / 2];
    const reflected = make(2 * ca - worst.a, 2 * cb - worst.b);
    count += 1;
    if (reflected.y < best.y) {
      const further = make(3 * ca - 2 * worst.a, 3 * cb - 2 * worst.b);
      count += 1;
      corners[2] = further.y < reflected.y ? further : reflected;
    } else if (reflected.y < middle.y) corners[2] = reflected;
    else {
      const nearer = make((ca + worst.a) / 2, (cb + worst.b) / 2);
      count += 1;
      if (nearer.y < worst.y) corners[2] = nearer;
      else {
        corners[1] = make((best.a + middle.a) / 2, (best.b + middle.b) / 2);
        corners[2] = make((best.a + worst.a) / 2, (best.b + worst.b) / 2);
        count += 2;
      }
    }
  }
  corners.sort((p, q) => p.y - q.y);
  return [corners[0]!.a, corners[0]!.b];
}

/** One angle only: golden section within +-4 steps. */
function simplexLine(cost: (a: number) => number, step: number): number {
  const ratio = (Math.sqrt(5) - 1) / 2;
  let [low, high] = [-4 * step, 4 * step];
  let [x1, x2] = [high - ratio * (high - low), low + ratio * (high - low)];
  let [y1, y2] = [cost(x1), cost(x2)];
  for (let turn = 0; turn < 20; turn += 1) {
    if (y1 < y2) {
      [high, x2, y2] = [x2, x1, y1];
      x1 = high - ratio * (high - low);
      y1 = cost(x1);
    } else {
      [low, x1, y1] = [x1, x2, y2];
      x2 = low + ratio * (high - low);
      y2 = cost(x2);
    }
  }
  return (low + high) / 2;
}
