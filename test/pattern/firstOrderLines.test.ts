import { describe, expect, it } from 'vitest';
import { firstOrderLines, pascalRow } from '../../src/pattern/firstOrderLines.js';
import { parsePattern } from '../../src/pattern/parsePattern.js';
import { trinomialLines, trinomialRow } from '../../src/pattern/trinomialLines.js';

function linesOf(text: string, couplingsHz: readonly number[]) {
  const parsed = parsePattern(text, couplingsHz);
  if (!parsed.ok) throw new Error(parsed.problem.message);
  return firstOrderLines(parsed.value);
}

function expectLines(lines: ReturnType<typeof firstOrderLines>, offsets: readonly number[], weights: readonly number[]) {
  const total = weights.reduce((sum, weight) => sum + weight, 0);
  expect(lines).toHaveLength(offsets.length);
  for (const [index, line] of lines.entries()) {
    expect(line.offsetHz).toBeCloseTo(offsets[index]!, 9);
    expect(line.share).toBeCloseTo(weights[index]! / total, 12);
  }
}

// Expected values: shared reference, worked examples, section 5 (derived from textbook formulas).
describe('firstOrderLines', () => {
  it.each([
    [1, [1, 1]],
    [2, [1, 2, 1]],
    [3, [1, 3, 3, 1]],
    [4, [1, 4, 6, 4, 1]],
    [5, [1, 5, 10, 10, 5, 1]],
    [6, [1, 6, 15, 20, 15, 6, 1]],
    [7, [1, 7, 21, 35, 35, 21, 7, 1]],
    [8, [1, 8, 28, 56, 70, 56, 28, 8, 1]],
  ])("gives %i neighbours the intensities of Pascal's triangle", (neighbours, row) => expect(pascalRow(neighbours)).toEqual(row));

  it('spaces a nonet by J and makes its inner line 70 times its outer one', () => {
    const lines = linesOf('non', [6.6]);
    expectLines(lines, [26.4, 19.8, 13.2, 6.6, 0, -6.6, -13.2, -19.8, -26.4], [1, 8, 28, 56, 70, 56, 28, 8, 1]);
    expect(lines[0]!.share).toBeCloseTo(1 / 256, 12);
  });

  it('gives dd, ddd, dt, td and qd their lines', () => {
    expectLines(linesOf('dd', [8, 2]), [5, 3, -3, -5], [1, 1, 1, 1]);
    expectLines(linesOf('ddd', [10, 6, 2]), [9, 7, 3, 1, -1, -3, -7, -9], [1, 1, 1, 1, 1, 1, 1, 1]);
    expectLines(linesOf('dt', [12, 4]), [10, 6, 2, -2, -6, -10], [1, 2, 1, 1, 2, 1]);
    expectLines(linesOf('td', [7.7, 5.9]), [10.65, 4.75, 2.95, -2.95, -4.75, -10.65], [1, 1, 2, 2, 1, 1]);
    expectLines(linesOf('qd', [7, 5.2]), [13.1, 7.9, 6.1, 0.9, -0.9, -6.1, -7.9, -13.1], [1, 1, 3, 3, 3, 3, 1, 1]);
  });

  it('merges coincident lines, so a dd with equal couplings is a triplet', () => {
    expect(linesOf('dd', [7, 7])).toEqual(linesOf('t', [7]));
  });

  it('gives a singlet one line, and none to a pattern that declares none', () => {
    expect(linesOf('s', [])).toEqual([{ offsetHz: 0, share: 1 }]);
    expect(linesOf('m', [])).toEqual([]);
    expect(linesOf('q', [])).toEqual([]);
  });

  it('reads a negative coupling as its size, because first order does not show the sign', () => {
    expect(linesOf('dd', [-12, 7])).toEqual(linesOf('dd', [12, 7]));
  });
});

describe('trinomialLines', () => {
  it.each([
    [1, [1, 1, 1]],
    [2, [1, 2, 3, 2, 1]],
    [3, [1, 3, 6, 7, 6, 3, 1]],
    [4, [1, 4, 10, 16, 19, 16, 10, 4, 1]],
    [5, [1, 5, 15, 30, 45, 51, 45, 30, 15, 5, 1]],
  ])('gives %i deuterons trinomial intensities', (deuterons, row) => expect(trinomialRow(deuterons)).toEqual(row));

  it('makes CHD2 a quintet 1:2:3:2:1', () => {
    expectLines(trinomialLines(2, 1.9), [3.8, 1.9, 0, -1.9, -3.8], [1, 2, 3, 2, 1]);
  });
});
