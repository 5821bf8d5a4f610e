/** Median of numbers, shape (n); the lower middle for an even count. Does not touch its argument. */
export function medianOf(values: ArrayLike<number>): number {
  const sorted = Float64Array.from(values).sort();
  return sorted.length > 0 ? sorted[(sorted.length - 1) >> 1]! : Number.NaN;
}
