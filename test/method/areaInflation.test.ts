import { inverse, Matrix } from 'ml-matrix';
import { describe, expect, it } from 'vitest';
import { areaInflation } from '../../src/method/areaInflation.js';
import { overlapShare, type PlacedPattern } from '../../src/method/overlapShare.js';
import { firstOrderLines } from '../../src/pattern/firstOrderLines.js';
import { lorentzSum } from '../../src/pattern/lorentzSum.js';
import { parsePattern } from '../../src/pattern/parsePattern.js';

function placed(centreHz: number, text: string, couplingsHz: readonly number[] = []): PlacedPattern {
  const pattern = parsePattern(text, couplingsHz);
  if (!pattern.ok) throw new Error(pattern.problem.message);
  return { centreHz, lines: firstOrderLines(pattern.value) };
}

/** The same quantity from a sampled spectrum with numeric derivatives: design matrix, normal equations, inverse. */
function numericInflation(patterns: readonly PlacedPattern[], widthHz: number): number[] {
  const column = (pattern: PlacedPattern, shift: number) =>
    Array.from({ length: 24_001 }, (_, index) =>
      lorentzSum(pattern.lines, widthHz, (index - 12_000) * 0.05 - pattern.centreHz - shift),
    );
  const step = 1e-3;
  const curves = patterns.map((pattern) => column(pattern, 0));
  const slopes = patterns.map((pattern) => {
    const [plus, minus] = [column(pattern, step), column(pattern, -step)];
    return plus.map((value, index) => (value - minus[index]!) / (2 * step));
  });
  const variances = (columns: readonly number[][]) => {
    const normal = new Matrix(
      columns.map((a) => columns.map((b) => a.reduce((sum, value, index) => sum + value * b[index]!, 0))),
    );
    return inverse(normal).diagonal();
  };
  const joint = variances([...curves, ...slopes]);
  return patterns.map((_, index) => Math.sqrt(joint[index]! / variances([curves[index]!, slopes[index]!])[0]!));
}

describe('areaInflation', () => {
  it.each([
    ['two singlets one width apart', [placed(0, 's'), placed(1, 's')]],
    ['a quartet over a triplet', [placed(0, 'q', [7.1]), placed(3, 't', [7.1])]],
    ['three signals of one region', [placed(0, 'q', [7.1]), placed(5, 's'), placed(12, 'd', [6])]],
  ])('agrees with a sampled spectrum for %s', (_, patterns) => {
    const expected = numericInflation(patterns, 1);
    // 1 %: the sampled axis ends 600 Hz away, the formula goes on.
    for (const [index, factor] of areaInflation(patterns, 1).entries()) expect(factor / expected[index]!).toBeCloseTo(1, 2);
  });

  it('is 1 for signals far apart and grows as they come together', () => {
    const factor = (apart: number) => areaInflation([placed(0, 's'), placed(apart, 's')], 1)[0]!;
    expect(factor(300)).toBeCloseTo(1, 3);
    expect(factor(2)).toBeLessThan(factor(1));
    expect(factor(1)).toBeLessThan(factor(0.5));
  });

  it('is infinite for two signals that are one curve', () => {
    expect(areaInflation([placed(0, 'q', [7]), placed(0, 'q', [7])], 1)).toEqual([
      Number.POSITIVE_INFINITY,
      Number.POSITIVE_INFINITY,
    ]);
  });
});

describe('overlapShare', () => {
  it('is 1 for the same curve, small for distant ones', () => {
    expect(overlapShare(placed(0, 'q', [7]), placed(0, 'q', [7]), 1)).toBeGreaterThan(0.97);
    expect(overlapShare(placed(0, 's'), placed(100, 's'), 1)).toBeLessThan(0.02);
    expect(overlapShare(placed(0, 's'), placed(1000, 's'), 1)).toBe(0);
  });

  it('agrees with the analytic overlap of two Lorentzians', () => {
    // Beyond the midpoint each has 1/2 - arctan(d / w) / pi of its area; twice that is shared.
    for (const apart of [0.5, 1, 4]) {
      const expected = 2 * (0.5 - Math.atan(apart) / Math.PI);
      expect(overlapShare(placed(0, 's'), placed(apart, 's'), 1)).toBeCloseTo(expected, 1);
    }
  });

  it('is half for a doublet that shares one line', () => {
    const shared = overlapShare(placed(0, 'd', [20]), placed(20, 'd', [20]), 1);
    expect(shared).toBeGreaterThan(0.48);
    expect(shared).toBeLessThan(0.56);
  });
});
