import type { Line } from './pattern.js';

/**
 * Hz^2: what the merges behind one line may add to the spread of a signal's lines. Against a line of 0.5 Hz width, the narrowest in practice,
 * 5e-6 changes a height by 4 x 5e-6 / 0.25, less than 1 in 10,000.
 */
const spreadHz2 = 5e-6;
/** Even the faintest line stays this close to its place. */
const reachHz = 0.3;

/**
 * Joins neighbouring lines where no line width can show the difference: strong ones only when they nearly coincide, faint ones
 * to a neighbour within a third of a hertz. Strong coupling splits into hundreds of lines that a fit need not carry.
 *
 * @param lines  shape (n), by descending offset, Hz, shares summing to 1
 * @returns shape (m <= n), by descending offset, the same centre of gravity and total share
 */
export function thinLines(lines: readonly Line[]): Line[] {
  const thinned: Line[] = [];
  let spread = 0;
  for (const line of lines) {
    const last = thinned.at(-1);
    if (last !== undefined) {
      const apart = last.offsetHz - line.offsetHz;
      const share = last.share + line.share;
      const added = (last.share * line.share * apart * apart) / share;
      if (apart <= reachHz && spread + added <= spreadHz2) {
        const offsetHz = (last.offsetHz * last.share + line.offsetHz * line.share) / share;
        thinned[thinned.length - 1] = { offsetHz: Math.abs(offsetHz) < 1e-9 ? 0 : offsetHz, share };
        spread += added;
        continue;
      }
    }
    thinned.push(line);
    spread = 0;
  }
  return thinned;
}
