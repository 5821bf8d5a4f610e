const lagMax = 96;

/**
 * Autocorrelation of the noise of a transformed FID at neighbouring points: zero filling and the window correlate them.
 *
 * @param acquiredPoints points that hold noise
 * @param pointCount     points of the transform
 * @param decayPerPoint  natural logarithm by which the window falls from point to point
 * @returns shape (m), lags 0, 1, 2 ...; cut where it stays below 0.005
 * @source transform of the squared window, a geometric sum
 */
export function noiseCorrelationOf(acquiredPoints: number, pointCount: number, decayPerPoint: number): Float64Array {
  const values: number[] = [];
  for (let lag = 0; lag <= lagMax; lag += 1)
    values.push(windowSum(acquiredPoints, -2 * decayPerPoint, (2 * Math.PI * lag) / pointCount));
  const scaled = values.map((value) => value / values[0]!);
  let end = scaled.length - 1;
  while (end > 0 && Math.abs(scaled[end]!) < 0.005) end -= 1;
  return Float64Array.from(scaled.slice(0, end + 1));
}

/** Real part of the sum of exp((a + i b) k) for k = 0 .. n - 1. */
function windowSum(n: number, a: number, b: number): number {
  const [qr, qi] = [Math.exp(a) * Math.cos(b), Math.exp(a) * Math.sin(b)];
  const norm = (1 - qr) ** 2 + qi ** 2;
  if (norm < 1e-18) return n;
  const [pr, pi] = [1 - Math.exp(a * n) * Math.cos(b * n), -Math.exp(a * n) * Math.sin(b * n)];
  return (pr * (1 - qr) + pi * -qi) / norm;
}

/**
 * The same, estimated from signal-free places of a spectrum whose window is not known.
 *
 * @param real   shape (n), flat
 * @param masked shape (n), 1 where signal is
 * @returns shape (m), at most 17 lags, cut where it stays below 0.05
 */
export function measuredNoiseCorrelation(real: Float64Array, masked: Uint8Array): Float64Array {
  const sums = new Float64Array(17);
  const counts = new Float64Array(17);
  for (let i = 0; i + 16 < real.length; i += 1) {
    if (masked[i] === 1 || masked[i + 16] === 1) continue;
    for (let lag = 0; lag <= 16; lag += 1) {
      sums[lag] = sums[lag]! + real[i]! * real[i + lag]!;
      counts[lag] = counts[lag]! + 1;
    }
  }
  if (!(sums[0]! > 0)) return Float64Array.of(1);
  const scaled = Array.from(sums, (sum, lag) => sum / counts[lag]! / (sums[0]! / counts[0]!));
  let end = 16;
  while (end > 0 && Math.abs(scaled[end]!) < 0.05) end -= 1;
  return Float64Array.from(scaled.slice(0, end + 1));
}
