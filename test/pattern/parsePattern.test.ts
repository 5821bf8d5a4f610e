import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseListed } from '../../src/pattern/parseListed.js';
import { parsePattern } from '../../src/pattern/parsePattern.js';
import { printPattern } from '../../src/pattern/printPattern.js';
import { splittingLetters } from '../../src/pattern/splittingLetters.js';

function textOf(written: string): string {
  const parsed = parsePattern(written, []);
  return parsed.ok ? parsed.value.text : parsed.problem.code;
}

describe('parsePattern', () => {
  it.each([
    ['s', 's'],
    ['d', 'd'],
    ['t', 't'],
    ['q', 'q'],
    ['quint', 'quint'],
    ['quin', 'quint'],
    ['p', 'quint'],
    ['pentet', 'quint'],
    ['quintet', 'quint'],
    ['quartet', 'q'],
    ['Quadruplet', 'q'],
    ['sext', 'sext'],
    ['Sextet', 'sext'],
    ['sept', 'sept'],
    ['hept', 'sept'],
    ['septet', 'sept'],
    ['oct', 'oct'],
    ['non', 'non'],
    ['nonet', 'non'],
    ['TRIPLET', 't'],
    ['dd', 'dd'],
    ['dt', 'dt'],
    ['td', 'td'],
    ['dq', 'dq'],
    ['qd', 'qd'],
    ['ddd', 'ddd'],
    ['dddd', 'dddd'],
    ['tt', 'tt'],
    ['ddt', 'ddt'],
    ['dsept', 'dsept'],
    ['dquint', 'dquint'],
    ['tsext', 'tsext'],
    ['dp', 'dquint'],
    ['doublet of doublets', 'dd'],
    ['doublet of quartets', 'dq'],
    ['triplet of doublets', 'td'],
    ['d of t', 'dt'],
    ['d,t', 'dt'],
    ['br s', 'br s'],
    ['br. s', 'br s'],
    ['brs', 'br s'],
    ['bs', 'br s'],
    ['s br', 'br s'],
    ['s (broad)', 'br s'],
    ['br', 'br s'],
    ['broad singlet', 'br s'],
    ['br t', 'br t'],
    ['brt', 'br t'],
    ['bt', 'br t'],
    ['bd', 'br d'],
    ['br dd', 'br dd'],
    ['br m', 'br m'],
    ['m', 'm'],
    ['multiplet', 'm'],
    ['dm', 'dm'],
    ['app t', 't'],
    ['app. quint', 'quint'],
    ['apparent triplet', 't'],
    ['\u03c8t', 't'],
  ])('reads %j as %s', (written, text) => expect(textOf(written)).toBe(text));

  it.each([
    '',
    'x',
    'sd',
    'ss',
    'mm',
    'H',
    'NH',
    'Q',
    'dddddddd',
    'of',
    'd8',
    'h',
    'constructor',
    'triplett',
    'dtriplet',
    'd'.repeat(200),
  ])('refuses %j', (written) => expect(textOf(written)).toBe('pattern-unreadable'));

  it('gives the couplings to the splittings in the written order, with the neighbours of each letter', () => {
    const parsed = parsePattern('dqt', [15.5, 7, 1.7]);
    expect(parsed.ok && parsed.value.splittings).toEqual([
      { letter: 'd', neighbours: 1, couplingHz: 15.5 },
      { letter: 'q', neighbours: 3, couplingHz: 7 },
      { letter: 't', neighbours: 2, couplingHz: 1.7 },
    ]);
  });

  it.each([
    ['dd', [7.1]],
    ['t', [7.1, 7.1]],
    ['s', [7.1]],
    ['m', [7.1]],
    ['dm', [7.1]],
  ])('refuses %s with %j because the counts disagree', (written, couplings) => {
    const parsed = parsePattern(written, couplings);
    expect(parsed.ok ? 'accepted' : parsed.problem.code).toBe('pattern-couplings-count');
  });

  it.each([0, Number.NaN, Number.POSITIVE_INFINITY, 1e9])('refuses a coupling of %s Hz', (coupling) => {
    const parsed = parsePattern('d', [coupling]);
    expect(parsed.ok ? 'accepted' : parsed.problem.code).toBe('pattern-coupling-invalid');
  });

  it('answers any text with a result, never with a throw', () => {
    fc.assert(
      fc.property(fc.string(), fc.array(fc.double(), { maxLength: 4 }), (text, couplings) => {
        expect(typeof parsePattern(text, couplings).ok).toBe('boolean');
        expect(typeof parseListed(text).ok).toBe('boolean');
      }),
    );
  });
});

describe('printPattern', () => {
  it('prints couplings to a tenth of a hertz, or as finely as they were given', () => {
    const parsed = parsePattern('ddd', [15, 6.7, 1.25]);
    expect(parsed.ok && printPattern(parsed.value)).toBe('ddd, J = 15.0, 6.7, 1.25 Hz');
  });

  it('prints what parseListed reads back to the same pattern', () => {
    const letter = fc.constantFrom(...splittingLetters.slice(1));
    const splitting = fc.record({ letter, tenths: fc.integer({ min: 1, max: 400 }) });
    fc.assert(
      fc.property(fc.array(splitting, { minLength: 1, maxLength: 3 }), fc.boolean(), (splittings, isBroad) => {
        const text = `${isBroad ? 'br ' : ''}${splittings.map((item) => item.letter).join('')}`;
        const first = parsePattern(
          text,
          splittings.map(({ tenths }) => tenths / 10),
        );
        if (!first.ok) throw new Error(`${text}: ${first.problem.message}`);
        const again = parseListed(`4.12 (${printPattern(first.value)}, 2H)`);
        expect(again.ok && again.value.pattern).toEqual(first.value);
      }),
    );
  });
});
