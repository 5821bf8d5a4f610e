import { describe, expect, it } from 'vitest';
import { parseNumber } from '../../src/decode/parseNumber.js';

describe('parseNumber', () => {
  it.each([
    ['400.13', 400.13],
    [' -0.75 ', -0.75],
    ['+12', 12],
    ['.5', 0.5],
    ['16385.000000000', 16385],
    ['0.4159993E-04', 0.4159993e-4],
    ['6.93333333333334e-05', 6.93333333333334e-5],
    ['400,1321', 400.1321],
    ['0,000', 0],
    ['0,123', 0.123],
    ['-802,26', -802.26],
  ])('reads %s', (text, value) => {
    expect(parseNumber(text)).toMatchObject({ value, hasComma: text.includes(',') });
  });

  it.each([
    '',
    'abc',
    '1 2',
    '1.2.3',
    '1,2,3',
    '.',
    '-',
    '5,',
    ',5',
    'NaN',
    'Infinity',
    '1e400',
    '0x10',
    '1_000',
    '1'.repeat(50_000),
  ])('does not take %j for a number', (text) => {
    expect(parseNumber(text)).toBe('not-a-number');
  });

  it.each(['1,024', '400,132', '16,384'])('does not guess whether %s is a decimal or a thousand', (text) => {
    expect(parseNumber(text)).toBe('comma-ambiguous');
  });

  it('says how far the printed digits may be off', () => {
    expect(parseNumber('2.9327')).toMatchObject({ rounding: expect.closeTo(5e-5, 12), roundingLoose: expect.closeTo(5e-5, 12) });
    expect(parseNumber('-422.0000')).toMatchObject({ rounding: expect.closeTo(5e-5, 12), roundingLoose: 0.5 });
    expect(parseNumber('8192')).toMatchObject({ rounding: 0, roundingLoose: 0.5 });
  });
});
