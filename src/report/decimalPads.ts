const plain = /^[\u2212-]?\d+(?:\.(\d+))?$/;

/**
 * How many places each cell of a column lacks behind the decimal point, so that the points stand under each other.
 *
 * @param cells one column
 * @returns places to leave free at the right of each cell; zeros when the column holds other text than numbers
 */
export function decimalPads(cells: readonly string[]): number[] {
  const decimals = cells.map((cell) => {
    const match = plain.exec(cell);
    return match ? (match[1]?.length ?? -1) : undefined;
  });
  const known = decimals.filter((count) => count !== undefined);
  const most = Math.max(-1, ...known);
  // A whole number lacks the point itself as well: half a digit wide.
  return decimals.map((count) => (count === undefined || most < 0 ? 0 : count < 0 ? most + 0.5 : most - count));
}
