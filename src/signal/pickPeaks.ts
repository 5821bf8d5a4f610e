/** One peak of a trace. */
export interface Peak {
  /** Hz on the trace's axis. */
  readonly shiftHz: number;
  /** Least-squares area of a line there, units of the data x Hz. */
  readonly area: number;
}

/**
 * Picks the lines of a trace by a matched filter: local maxima of the least-squares area of one line, with the place refined by
 * a parabola through three points.
 *
 * @param data    shape (n), baseline near zero, falls by `stepHz` per point from `firstHz`
 * @param widthHz line width sought
 * @param areaMin smaller ones are noise
 * @returns by descending shift
 * @source  matched filter (textbook); parabola through three points (derived)
 */
export function pickPeaks(data: Float64Array, firstHz: number, stepHz: number, widthHz: number, areaMin: number): Peak[] {
  const reach = Math.max(1, Math.ceil((1.5 * widthHz) / stepHz));
  const kernel = Float64Array.from({ length: 2 * reach + 1 }, (_, k) => {
    const u = (2 * (k - reach) * stepHz) / widthHz;
    return 2 / (Math.PI * widthHz * (1 + u * u));
  });
  const mean = kernel.reduce((sum, value) => sum + value, 0) / kernel.length;
  // Without its mean the filter does not see the shoulders of broad neighbours and narrows what it shows.
  const sharp = kernel.map((value) => value - mean);
  const energy = sharp.reduce((sum, value) => sum + value * value, 0);
  const areas = new Float64Array(data.length);
  // Where not even a third of the height stands no line of that area can be.
  const least = (0.3 * areaMin * 2) / (Math.PI * widthHz);
  for (let i = reach; i < data.length - reach; i += 1) {
    if (data[i]! < least) continue;
    let sum = 0;
    for (let k = -reach; k <= reach; k += 1) sum += data[i + k]! * sharp[k + reach]!;
    areas[i] = sum / energy;
  }
  const peaks: Peak[] = [];
  for (let i = 1; i < data.length - 1; i += 1) {
    const [left, top, right] = [areas[i - 1]!, areas[i]!, areas[i + 1]!];
    if (top < areaMin || top <= left || top < right) continue;
    const curve = left - 2 * top + right;
    const off = curve < 0 ? (left - right) / (2 * curve) : 0;
    peaks.push({ shiftHz: firstHz - (i + off) * stepHz, area: top });
  }
  return peaks;
}
