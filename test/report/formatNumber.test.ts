import { expect, test } from 'vitest';
import { decimalPads } from '../../src/report/decimalPads.js';
import {
  formatElapsed,
  formatPercent,
  formatQuantity,
  formatTarget,
  formatU,
  formatValue,
} from '../../src/report/formatNumber.js';

// Source of the cases: JCGM 100:2008, 7.2.6 (two significant figures of u); m_S = 100.02147(35) g is its example in 7.2.2.
test('the decimals of a value follow two significant figures of its uncertainty', () => {
  expect(formatQuantity(100.021471, 0.00035)).toBe('100.02147 (u 0.00035)');
  expect(formatQuantity(0.43123456, 0.0011)).toBe('0.4312 (u 0.0011)');
  expect(formatQuantity(1731.4, 68)).toBe('1731 (u 68)');
  expect(formatPercent(0.99464, 0.0006)).toBe('99.464 % (u 0.060 %)');
});

test('what is missing is "not determined", never zero or blank', () => {
  for (const value of [undefined, Number.NaN, Number.POSITIVE_INFINITY]) expect(formatValue(value, 0.1)).toBe('not determined');
  expect(formatPercent(undefined, undefined)).toBe('not determined');
});

test('negative numbers carry a true minus sign; very small ones an exponent', () => {
  expect(formatValue(-0.0123, 0.0011)).toBe('\u22120.0123');
  expect(formatValue(2.6e-5, 1e-6)).toBe('2.60e-5');
  expect(formatU(1e-6)).toBe('0.0000010');
});

test('elapsed time and targets read as people say them', () => {
  expect([0, 59 * 60, 3600, 25_500].map(formatElapsed)).toEqual(['0 min', '59 min', '1 h 00 min', '7 h 05 min']);
  expect([0.98, 0.985, 0.07].map(formatTarget)).toEqual(['98 %', '98.5 %', '7 %']);
});

test('decimal points of a column stand under each other', () => {
  expect(decimalPads(['1.25', '10', '\u22120.5', '\u2013'])).toEqual([0, 2.5, 1, 0]);
  expect(decimalPads(['7 min', '1 h 05 min'])).toEqual([0, 0]);
});
