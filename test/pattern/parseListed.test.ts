import { describe, expect, it } from 'vitest';
import { parseListed } from '../../src/pattern/parseListed.js';

interface Case {
  readonly text: string;
  readonly shift: number;
  readonly range?: readonly [number, number];
  readonly pattern: string;
  readonly couplings?: readonly number[];
  readonly nuclei: number;
  readonly broad?: boolean;
}

/** The first six are the examples of the method file's documentation; the others are written forms of common practice. */
const cases: readonly Case[] = [
  { text: '4.12 (q, J = 7.1 Hz, 2H)', shift: 4.12, pattern: 'q', couplings: [7.1], nuclei: 2 },
  { text: '7.24 (dd, J = 15.9, 6.7 Hz, 1 H)', shift: 7.24, pattern: 'dd', couplings: [15.9, 6.7], nuclei: 1 },
  { text: '1.62 (sext, J = 7.4 Hz, 2H)', shift: 1.62, pattern: 'sext', couplings: [7.4], nuclei: 2 },
  { text: '7.40-7.28 (m, 5H)', shift: 7.34, range: [7.28, 7.4], pattern: 'm', nuclei: 5 },
  { text: '3.1 (br s, 1H)', shift: 3.1, pattern: 'br s', nuclei: 1, broad: true },
  { text: '-62.9 (s, 3F)', shift: -62.9, pattern: 's', nuclei: 3 },
  { text: '\u03b4 4.12 (q, J=7.1, 2H)', shift: 4.12, pattern: 'q', couplings: [7.1], nuclei: 2 },
  { text: '7.28\u20137.40 (m, 5 H)', shift: 7.34, range: [7.28, 7.4], pattern: 'm', nuclei: 5 },
  { text: '7.28 \u2212 7.40 (5H, m, ArH)', shift: 7.34, range: [7.28, 7.4], pattern: 'm', nuclei: 5 },
  { text: '-62.9 to -63.4 (m, 3F)', shift: -63.15, range: [-63.4, -62.9], pattern: 'm', nuclei: 3 },
  { text: '\u2212113.2 (tt, J = 8.6, 5.4 Hz, 1F)', shift: -113.2, pattern: 'tt', couplings: [8.6, 5.4], nuclei: 1 },
  { text: '1.25 (t, \u00b3J = 7.1 Hz, 3H, CH3)', shift: 1.25, pattern: 't', couplings: [7.1], nuclei: 3 },
  { text: '1.25 (t, 3J_HH = 7.1 Hz, 3H)', shift: 1.25, pattern: 't', couplings: [7.1], nuclei: 3 },
  { text: '1.25 (t, J(H,H) = 7.1 Hz, 3H)', shift: 1.25, pattern: 't', couplings: [7.1], nuclei: 3 },
  { text: '5.8 (dd, J1 = 17.2 Hz, J2 = 10.4 Hz, 1H)', shift: 5.8, pattern: 'dd', couplings: [17.2, 10.4], nuclei: 1 },
  { text: '5.8 (dd, J_{1,2} = 17.2, J_{1,3} = 10.4, 1H)', shift: 5.8, pattern: 'dd', couplings: [17.2, 10.4], nuclei: 1 },
  { text: '5.84 (dq, J = 15.5 and 1.7 Hz, 1H, =CH)', shift: 5.84, pattern: 'dq', couplings: [15.5, 1.7], nuclei: 1 },
  { text: '1.21 (d, J = 6.2 Hz, 2 x CH3)', shift: 1.21, pattern: 'd', couplings: [6.2], nuclei: 6 },
  { text: '1.21 (d, J = 6.2 Hz, 6H, 2 \u00d7 CH3)', shift: 1.21, pattern: 'd', couplings: [6.2], nuclei: 6 },
  { text: '3.71 (s, OCH3)', shift: 3.71, pattern: 's', nuclei: 3 },
  { text: '4.05 (t, J = 6.7 Hz, 2H) OCH2', shift: 4.05, pattern: 't', couplings: [6.7], nuclei: 2 },
  { text: '4.05 (2H, t, 6.7 Hz)', shift: 4.05, pattern: 't', couplings: [6.7], nuclei: 2 },
  { text: '4.05 (2H, t, J 6.7)', shift: 4.05, pattern: 't', couplings: [6.7], nuclei: 2 },
  { text: '4.05, t, J = 6.7 Hz, 2H', shift: 4.05, pattern: 't', couplings: [6.7], nuclei: 2 },
  { text: '4.05 ppm [triplet, J = 6.7 Hz, 2H]', shift: 4.05, pattern: 't', couplings: [6.7], nuclei: 2 },
  { text: '4,12 (q, J = 7,1 Hz, 2H)', shift: 4.12, pattern: 'q', couplings: [7.1], nuclei: 2 },
  { text: '6,91 (dd; J = 17,5; 10,8 Hz; 1H)', shift: 6.91, pattern: 'dd', couplings: [17.5, 10.8], nuclei: 1 },
  { text: '7.5 (ddd, J = 2 x 8.0, 1.2 Hz, 1H)', shift: 7.5, pattern: 'ddd', couplings: [8, 8, 1.2], nuclei: 1 },
  { text: '5.5 (s, br, 1H, OH)', shift: 5.5, pattern: 'br s', nuclei: 1, broad: true },
  { text: '5.5 (br, 1H)', shift: 5.5, pattern: 'br s', nuclei: 1, broad: true },
  { text: '5.01 (sept, J = 6.3 Hz, 1H, (CH3)2CH)', shift: 5.01, pattern: 'sept', couplings: [6.3], nuclei: 1 },
  { text: '5.01 (hept, J = 6.3 Hz, 1H, H-2)', shift: 5.01, pattern: 'sept', couplings: [6.3], nuclei: 1 },
  { text: "7.60 (d, J = 8.4 Hz, 2H, H-2', H-6')", shift: 7.6, pattern: 'd', couplings: [8.4], nuclei: 2 },
  { text: '2.31 (app t, J = 7.5 Hz, 2H)', shift: 2.31, pattern: 't', couplings: [7.5], nuclei: 2 },
  { text: '2.31 (q, 2H)', shift: 2.31, pattern: 'q', nuclei: 2 },
  { text: '0 (s, 9H)', shift: 0, pattern: 's', nuclei: 9 },
];

describe('parseListed', () => {
  it.each(cases)('reads $text', ({ text, shift, range, pattern, couplings, nuclei, broad }) => {
    const listed = parseListed(text);
    if (!listed.ok) throw new Error(listed.problem.message);
    expect(listed.value.shiftPpm).toBeCloseTo(shift, 9);
    expect(listed.value.rangePpm).toEqual(range);
    expect(listed.value.pattern.text).toBe(pattern);
    expect(listed.value.pattern.isBroad).toBe(broad ?? false);
    const found = listed.value.pattern.splittings.flatMap(({ couplingHz }) => couplingHz ?? []);
    expect(found).toEqual(couplings ?? []);
    expect(listed.value.nuclei).toBe(nuclei);
  });

  it.each([
    ['', 'listed-unreadable'],
    ['q, J = 7.1 Hz, 2H', 'listed-unreadable'],
    ['(missing) 3', 'listed-unreadable'],
    ['4.12 (J = 7.1 Hz, 2H)', 'listed-pattern-missing'],
    ['4.12 (q, J = 7.1 Hz)', 'listed-nuclei-missing'],
    ['4.12 (q, J = 7.1 Hz, 1.5H)', 'listed-nuclei-missing'],
    ['4.12 (q, t, J = 7.1 Hz, 2H)', 'listed-ambiguous'],
    ['4.12 (dd, J = 7.1 Hz, 2H)', 'pattern-couplings-count'],
    ['4.12 (s, J = 7.1 Hz, 2H)', 'pattern-couplings-count'],
    ['4.12 (q, J = 0 Hz, 2H)', 'pattern-coupling-invalid'],
    ['123456 (s, 1H)', 'listed-unreadable'],
  ])('refuses %j with %s', (text, code) => {
    const listed = parseListed(text);
    expect(listed.ok ? 'accepted' : listed.problem.code).toBe(code);
  });
});
