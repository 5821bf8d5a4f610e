/**
 * Where the stretch of a state began that still lasts at the last point.
 *
 * The rule looks at each point with what lies before it only, so a replay finds the same beginning at the same point. It ends by another
 * rule than it begins: a value that trembles about a limit is one event and not twenty.
 *
 * @param count  points
 * @param begins whether the state begins at a point, given that it does not hold
 * @param ends   whether it ends there, given that it holds since another point
 * @returns index of the point, or undefined when the state does not hold at the end
 */
export function beginningOf(
  count: number,
  begins: (index: number) => boolean,
  ends: (index: number, since: number) => boolean,
): number | undefined {
  let since: number | undefined;
  for (let index = 0; index < count; index += 1) {
    if (since === undefined) {
      if (begins(index)) since = index;
    } else if (ends(index, since)) since = begins(index) ? index : undefined;
  }
  return since;
}
