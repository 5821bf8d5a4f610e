/** A number for a terminal with a fixed count of decimals; an absent or broken one says so. */
export function plainNumber(value: number, decimals: number): string {
  return Number.isFinite(value) ? value.toFixed(decimals) : 'n/d';
}

/**
 * `0.4312 (0.0011)`: the value with as many decimals as two significant figures of its standard uncertainty ask for.
 *
 * @source JCGM 100:2008, 7.2.6: at most two significant figures in u
 */
export function plainQuantity(value: number, u: number): string {
  if (!Number.isFinite(value)) return 'n/d';
  if (!(u > 0)) return value.toPrecision(4);
  const decimals = Math.min(12, Math.max(0, 1 - Math.floor(Math.log10(u))));
  return `${value.toFixed(decimals)} (${u.toFixed(decimals)})`;
}
