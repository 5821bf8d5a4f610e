import { describe, expect, it } from 'vitest';
import { firstOrderLines } from '../../src/pattern/firstOrderLines.js';
import { lorentzSum } from '../../src/pattern/lorentzSum.js';
import { parsePattern } from '../../src/pattern/parsePattern.js';
import { patternPeaks } from '../../src/pattern/patternPeaks.js';

function linesOf(text: string, couplingsHz: readonly number[]) {
  const parsed = parsePattern(text, couplingsHz);
  if (!parsed.ok) throw new Error(parsed.problem.message);
  return firstOrderLines(parsed.value);
}

describe('patternPeaks', () => {
  it('finds each line of a resolved pattern to a few thousandths of a hertz, with its height', () => {
    // Off the sampling grid on purpose; wings of the neighbours move a peak by less than 0.001 Hz at this width.
    const lines = linesOf('q', [7.123]).map((line) => ({ ...line, offsetHz: line.offsetHz + 0.0317 }));
    const peaks = patternPeaks(lines, 0.3);
    expect(peaks).toHaveLength(4);
    for (const [index, peak] of peaks.entries()) {
      expect(Math.abs(peak.offsetHz - lines[index]!.offsetHz)).toBeLessThan(0.004);
      expect(peak.height).toBeCloseTo([1, 3, 3, 1][index]! / 3, 1);
    }
  });

  it('sees the outermost line of a nonet, and one peak where lines are closer than their width', () => {
    expect(patternPeaks(linesOf('non', [6.6]), 0.8)).toHaveLength(9);
    expect(patternPeaks(linesOf('d', [0.4]), 1)).toHaveLength(1);
    expect(patternPeaks([], 1)).toEqual([]);
  });
});

describe('lorentzSum', () => {
  it('has area 1 and falls to half at half the width', () => {
    const lines = linesOf('s', []);
    expect(lorentzSum(lines, 2, 1) / lorentzSum(lines, 2, 0)).toBeCloseTo(0.5, 12);
    // Analytic height of a Lorentzian of area 1: 2 / (pi w).
    expect(lorentzSum(lines, 2, 0)).toBeCloseTo(1 / Math.PI, 12);
  });
});
