import { describe, expect, it } from 'vitest';
import { firstOrderLines } from '../../src/pattern/firstOrderLines.js';
import { parsePattern } from '../../src/pattern/parsePattern.js';
import { patternPeaks } from '../../src/pattern/patternPeaks.js';
import { printPattern } from '../../src/pattern/printPattern.js';
import { readFirstOrder } from '../../src/pattern/readFirstOrder.js';
import { makeRandom } from '../../src/simulate/random.js';

/** Peaks of a drawn pattern with heights off by a few per cent and a lean of its lines, as a roof gives. */
function drawnPeaks(text: string, couplingsHz: readonly number[], widthHz: number, lean = 0) {
  const parsed = parsePattern(text, couplingsHz);
  if (!parsed.ok) throw new Error(parsed.problem.message);
  const random = makeRandom(5);
  return patternPeaks(firstOrderLines(parsed.value), widthHz).map(({ offsetHz, height }) => ({
    hz: 1000 + offsetHz + random.between(-0.1, 0.1),
    height: 50 * height * (1 + lean * Math.sign(offsetHz)) * random.between(0.96, 1.04),
  }));
}

describe('readFirstOrder', () => {
  it.each<readonly [string, readonly number[]]>([
    ['s', []],
    ['d', [8.7]],
    ['t', [7.1]],
    ['q', [7.1]],
    ['quint', [7]],
    ['sext', [7.4]],
    ['sept', [6.3]],
    ['non', [6.6]],
    ['dd', [15.9, 6.7]],
    ['dd', [14.3, 1.9]],
    ['dt', [15.5, 6.6]],
    ['td', [7.7, 1.6]],
    ['dq', [15.5, 6.9]],
    ['dq', [15.5, 1.7]],
    ['ddd', [17, 10.4, 6]],
    ['ddd', [8, 7.2, 1.4]],
  ])('reads %s, J = %j Hz back from its peaks', (text, couplings) => {
    const read = readFirstOrder(drawnPeaks(text, couplings, 0.7), 0.7);
    expect(read?.pattern.text).toBe(text);
    expect(Math.abs(read!.centreHz - 1000)).toBeLessThan(0.15);
    for (const [index, { couplingHz }] of read!.pattern.splittings.entries())
      expect(Math.abs(couplingHz! - couplings[index]!)).toBeLessThan(0.25);
  });

  it('reads a leaning quartet', () => {
    expect(readFirstOrder(drawnPeaks('q', [7.1], 0.7, 0.12), 0.7)?.pattern.text).toBe('q');
  });

  it('reads nothing into peaks of uneven distance or height', () => {
    const uneven = [0, 7, 16, 18].map((at, index) => ({ hz: 100 - at, height: [1, 3, 1, 2][index]! }));
    expect(readFirstOrder(uneven, 0.7)).toBeUndefined();
    expect(readFirstOrder([], 0.7)).toBeUndefined();
    const triplet = drawnPeaks('t', [7.1], 0.7).map(({ hz }) => ({ hz, height: 1 }));
    const read = readFirstOrder(triplet, 0.7);
    expect(read === undefined ? 'none' : printPattern(read.pattern)).toBe('none');
  });
});
