import type { Line } from './pattern.js';
import type { SpinLines } from './spinSystem.js';
import { thinLines } from './thinLines.js';

const turnsMax = 40;
/** The balance is done when no signal's sum is off by more than this, relative: far below any measurement. */
const balanced = 1e-6;
/** Share of a signal below which a line of it is left out. */
const faintShare = 2e-5;
/** Intensity, in nuclei, below which a whole line is left out before the balance. */
const faintLine = 1e-6;

/**
 * Deals the lines of a coupled system out to its signals. A line of a weakly coupled system belongs to one signal; a mixed one
 * is shared by the signals' own contributions to its transition moment (their squares), balanced so that the shares of every
 * line add up to its intensity and the lines of every signal to its number of nuclei. So the parts are never negative, their sum
 * is the exact spectrum, and a signal's area stays proportional to its nuclei.
 *
 * @param lines       lines of the system, Hz
 * @param nuclei      signal -> its number of nuclei in the system
 * @param centreHz    signal -> its frequency, Hz
 * @returns signal -> lines, Hz from the signal's own frequency, descending, shares summing to 1
 * @source  balance of a table to given margins: W. E. Deming, F. F. Stephan, Ann. Math. Stat. 11 (1940) 427-444
 */
export function shareLines(
  lines: SpinLines,
  nuclei: ReadonlyMap<string, number>,
  centreHz: ReadonlyMap<string, number>,
): ReadonlyMap<string, readonly Line[]> {
  const counts = lines.signals.map((signal) => nuclei.get(signal) ?? 0);
  const rows = Array.from(lines.frequencyHz.keys()).filter((row) => lines.intensity[row]! > faintLine);
  const table = balance(lines, rows, counts);
  return new Map(
    lines.signals.map((signal, column) => {
      const centre = centreHz.get(signal) ?? 0;
      const own: Line[] = [];
      for (const [index, row] of rows.entries()) {
        const share = table[index * counts.length + column]! / counts[column]!;
        if (share > faintShare) own.push({ offsetHz: lines.frequencyHz[row]! - centre, share });
      }
      const total = own.reduce((sum, line) => sum + line.share, 0);
      return [signal, thinLines(own.map((line) => ({ ...line, share: line.share / total })))] as const;
    }),
  );
}

/** shape (rows x signals) row by row: nuclei of each signal in each line. */
function balance(lines: SpinLines, rows: readonly number[], counts: readonly number[]): Float64Array {
  const width = counts.length;
  const table = new Float64Array(rows.length * width);
  for (const [index, row] of rows.entries())
    table.set(lines.ownMoments.subarray(row * width, row * width + width), index * width);
  const kept = rows.reduce((sum, row) => sum + lines.intensity[row]!, 0) / counts.reduce((sum, count) => sum + count, 0);
  const scale = new Float64Array(width).fill(1);
  for (let turn = 0; turn < turnsMax; turn++) {
    const sums = new Float64Array(width);
    for (let index = 0; index < rows.length; index++) {
      let sum = 0;
      for (let column = 0; column < width; column++) sum += table[index * width + column]! * scale[column]!;
      const factor = sum > 0 ? lines.intensity[rows[index]!]! / sum : 0;
      for (let column = 0; column < width; column++) {
        const part = table[index * width + column]! * scale[column]! * factor;
        table[index * width + column] = part;
        sums[column]! += part;
      }
    }
    let worst = 0;
    for (let column = 0; column < width; column++) {
      scale[column] = (counts[column]! * kept) / sums[column]!;
      worst = Math.max(worst, Math.abs(scale[column]! - 1));
    }
    if (worst < balanced) break;
  }
  return table;
}
