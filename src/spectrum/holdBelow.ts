import { smoothBanded } from './smoothBanded.js';

const turns = 3;
const samplesPerBin = 48;
/** The lowest points of a bin scatter by about a third of the noise: only what lies clearly above them is held. */
const slack = 1.5;
/** Mean of the lowest quarter of standard normal values. */
const lowestQuarter = -1.271;

/**
 * Holds a baseline below the data where lines cover it: lines in absorption only add, so a level above the lowest points of a covered
 * bin is too high, and the smoother is told so.
 *
 * @param real    shape (n)
 * @param means   shape (m), bin means; weights shape (m), free points a bin
 * @param levels  shape (m), the baseline so far
 * @param lambda  its smoothness
 * @param noise   rms of one point
 * @returns levels at bin centres, shape (m)
 * @source non-negativity of absorption
 */
export function holdBelow(
  real: Float64Array,
  { means, weights }: { readonly means: Float64Array; readonly weights: Float64Array },
  levels: Float64Array,
  lambda: number,
  noise: number,
): Float64Array {
  const m = means.length;
  const width = real.length / m;
  const typical = width / 2;
  const ceilings = means.map((_, bin) =>
    weights[bin]! > 0.1 * width
      ? Number.POSITIVE_INFINITY
      : lowestOf(real, Math.ceil(bin * width), width) - lowestQuarter * noise,
  );
  const [held, pull] = [Float64Array.from(means), Float64Array.from(weights)];
  let result = levels;
  for (let turn = 0; turn < turns; turn += 1) {
    let isHeld = true;
    for (let bin = 0; bin < m; bin += 1) {
      if (result[bin]! <= ceilings[bin]! + slack * noise) continue;
      held[bin] = ceilings[bin]!;
      pull[bin] = typical;
      isHeld = false;
    }
    if (isHeld) break;
    result = smoothBanded(held, pull, lambda);
  }
  return result;
}

function lowestOf(real: Float64Array, from: number, width: number): number {
  const count = Math.max(4, Math.min(samplesPerBin, Math.floor(width)));
  const values = new Float64Array(count);
  for (let k = 0; k < count; k += 1) values[k] = real[Math.min(real.length - 1, from + Math.floor((k * width) / count))]!;
  values.sort();
  const quarter = Math.max(1, count >> 2);
  let sum = 0;
  for (let k = 0; k < quarter; k += 1) sum += values[k]!;
  return sum / quarter;
}
