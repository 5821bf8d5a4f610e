import { Matrix, solve } from 'ml-matrix';
import type { Line } from './pattern.js';
import type { SpinLines } from './spinSystem.js';
import { thinLines } from './thinLines.js';

const turnsMax = 30;
/** Largest change of the logarithm of a factor in one turn. */
const stepMax = 1;
/** The balance is done when no signal's sum is off by more than this, relative: far below any measurement. */
const balanced = 1e-9;
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

/**
 * Finds one factor per signal so that, with every row scaled to its line's intensity, each column sums to its nuclei. The
 * logarithms of the factors minimise a convex function, so Newton steps find them in a few turns.
 *
 * @returns shape (rows x signals) row by row: nuclei of each signal in each line
 */
function balance(lines: SpinLines, rows: readonly number[], counts: readonly number[]): Float64Array {
  const width = counts.length;
  const table = new Float64Array(rows.length * width);
  const kept = rows.reduce((sum, row) => sum + lines.intensity[row]!, 0) / counts.reduce((sum, count) => sum + count, 0);
  const factors = new Float64Array(width).fill(1);
  for (let turn = 0; turn < turnsMax; turn++) {
    const { sums, slopes } = fill(table, lines, rows, factors);
    const miss = counts.map((count, column) => count * kept - sums[column]!);
    if (Math.max(...miss.map((value, column) => Math.abs(value) / counts[column]!)) < balanced) break;
    // Only ratios of factors matter, so the last one stays; a ridge keeps signals that share no line solvable.
    const free = width - 1;
    if (free === 0) break;
    const hessian = Matrix.zeros(free, free);
    for (let a = 0; a < free; a++)
      for (let b = 0; b < free; b++) hessian.set(a, b, slopes[a * width + b]! + (a === b ? 1e-9 : 0));
    const step = solve(hessian, Matrix.columnVector(miss.slice(0, free)));
    for (let column = 0; column < free; column++)
      factors[column]! *= Math.exp(Math.max(-stepMax, Math.min(stepMax, step.get(column, 0))));
  }
  return table;
}

/** Fills the table for given factors; returns its column sums and their derivatives by the logarithms of the factors. */
function fill(table: Float64Array, lines: SpinLines, rows: readonly number[], factors: Float64Array) {
  const width = factors.length;
  const sums = new Float64Array(width);
  const slopes = new Float64Array(width * width);
  for (let index = 0; index < rows.length; index++) {
    const row = rows[index]!;
    let sum = 0;
    for (let column = 0; column < width; column++) sum += lines.ownMoments[row * width + column]! * factors[column]!;
    const scale = sum > 0 ? lines.intensity[row]! / sum : 0;
    for (let column = 0; column < width; column++) {
      const part = lines.ownMoments[row * width + column]! * factors[column]! * scale;
      table[index * width + column] = part;
      sums[column]! += part;
      slopes[column * width + column]! += part;
      for (let other = 0; other <= column; other++) {
        const both = scale > 0 ? (part * table[index * width + other]!) / lines.intensity[row]! : 0;
        slopes[column * width + other]! -= both;
        if (other !== column) slopes[other * width + column]! -= both;
      }
    }
  }
  return { sums, slopes };
}
