import { describe, expect, it } from 'vitest';
import { walkTable } from '../../src/decode/walkTable.js';
import { bytesOf, problemOf, unwrap } from './sampleFile.js';

function walk(lines: string, pointsStated = 100) {
  const bytes = bytesOf(lines);
  return walkTable(bytes, { start: 0, end: bytes.length, firstLine: 1 }, pointsStated);
}

function ordinates(lines: string, pointsStated = 100): number[] {
  const { ordinates: all, count } = unwrap(walk(lines, pointsStated));
  return [...all.subarray(0, count)];
}

// Published examples: McDonald, Wilks, Appl. Spectrosc. 1988, 42, 151, tables VI and VII.
const tableSeven = [1, 2, 3, 3, 2, 1, 0, -1, -2, -3];
const tableSix =
  '0 0 0 0 2 4 4 4 7 5 4 4 5 5 7 10 11 11 6 5 7 6 9 9 7 10 10 9 10 11 12 15 16 16 14 17 38 38 35 38 42 47 54 59 66 75 78 88 96 104 110 121 128';
const tableSixDifdup = (first: string, last: string) =>
  `${first}@VKT%TLkj%J%KLJ%njKjL%kL%jJULJ%kLK1%lLMNPNPRLJ0QTOJ1P\n${last}A28       $$ checkpoint\n`;

describe('walkTable', () => {
  it.each([
    ['PAC with plus signs', '0 1+2+3+3+2+1+0-1-2-3'],
    ['PAC with blanks', '0 1 2 3 3 2 1 0-1-2-3'],
    ['SQZ with a plain leading digit', '0 1BCCBA@abc'],
    ['SQZ', '0ABCCBA@abc'],
    ['DIF with a plain leading digit', '0 1JJ%jjjjjj'],
    ['DIF', '0AJJ%jjjjjj'],
    ['DIF and DUP', '0 1JT%jX'],
  ])('decodes table VIIb as %s', (_, line) => {
    expect(ordinates(line)).toEqual(tableSeven);
  });

  it.each([
    ['50 and DUP', '0E0V'],
    ['50 and DIF', '0E0%%%'],
    ['50, DIF and DUP', '0E0%U'],
  ])('decodes four fifties as %s', (_, line) => {
    expect(ordinates(line)).toEqual([50, 50, 50, 50]);
  });

  it('decodes the 53 points of table VI in DIF and DUP, with abscissae in wavenumbers or counts', () => {
    const expected = tableSix.split(' ').map(Number);
    expect(ordinates(tableSixDifdup('599.860', '700.158'))).toEqual(expected);
    expect(ordinates(tableSixDifdup('311', '363'))).toEqual(expected);
  });

  it('notes where each line starts: the check ordinate repeats a point', () => {
    const { lineStarts, endsInDifference } = unwrap(walk(tableSixDifdup('311', '363')));
    expect(lineStarts.map(({ abscissa, pointIndex, line }) => [abscissa, pointIndex, line])).toEqual([
      [311, 0, 1],
      [363, 52, 2],
    ]);
    expect(endsInDifference).toBe(false);
  });

  it('refuses table VI with one difference changed, naming both values', () => {
    const problem = problemOf(walk(tableSixDifdup('311', '363').replace('KLJ%n', 'KLK%n')));
    expect(problem.code).toBe('jcamp-check-ordinate');
    expect(problem.message).toBe(
      'line 2: the check ordinate is 128, but the differences of line 1 lead to 129: one of these lines is damaged or a line is missing',
    );
  });

  // First lines of a public NMR test file (16384 points).
  it('decodes the first lines of an NMR spectrum in DIF', () => {
    const lines =
      '16383G6k53o5J88M13k12k70J95K00k13O1q3k25J80k9j20MQ6j16n7J70J57NL8q9N1M0k95\n16356a63J98K3J59m73m8J80J10M1k28k55J83J45r2K59R5k82p8j9L50j12QM7j82K30l17';
    const values = ordinates(lines);
    expect(values.slice(0, 30)).toEqual([
      76, -177, -242, -54, 359, 147, -123, 72, 272, 59, 120, 37, -188, -8, -37, -157, -153, -67, -183, -240, -70, 87, 92, 130, 41,
      92, 132, -163, 35, 58,
    ]);
  });

  it('decodes 32-bit ordinates in DIF', () => {
    expect(ordinates('16383B259260p502228j933248N560144J2266504o276506q034750N797312N919500')).toEqual([
      2259260, -5242968, -7176216, -1616072, 10650432, 4373926, -3660824, 2136488, 8055988,
    ]);
  });

  // Published with the jcampconverter library (MIT).
  it('decodes four lines with three check ordinates', () => {
    const lines = `482A885145L989378k853295J46714q39581j382088R41076k774051J365135l135709P53917
472a903359j71857q18832K573831k615133L481852l395846L894844l478693M916433
463B483240m513444O146172m826168N233079m522551M000252m097028L466111l460183
454i0520L061628k524598K788931k509430L219286k511160K709095k122775J594246
`;
    const expected =
      '1885145 5874523 3021228 3167942 2328361 946273 1887349 -886702 478433 -2657276 -1903359 -2075216 -2894048 -320217 -2935350 546502 -2849344 1045500 -2433193 2483240 -2030204 4115968 -710200 4522879 328 4000580 -96448 3369663 -90520 2971108 446510 3235441 726011 3945297 1434137 4143232 2020457 3614703';
    expect(ordinates(lines)).toEqual(expected.split(' ').map(Number));
  });

  it('reads decimals and powers of ten as the nearest double', () => {
    expect(ordinates('0 0.000307130 -0.1 1.5E+03 2.5e-07 .5 12345678901234567890.5')).toEqual([
      0.00030713,
      -0.1,
      1500,
      2.5e-7,
      0.5,
      Number('12345678901234567890.5'),
    ]);
    expect(ordinates('1.0E+03 7 8')).toEqual([7, 8]);
  });

  it('takes an E without a sign as the digit 5', () => {
    expect(ordinates('0E1F2')).toEqual([51, 62]);
  });

  it.each([
    ['a sign after E in a table of pseudo-digits', '0A1E+05', 'jcamp-exponent-ambiguous'],
    ['pseudo-digits after a power of ten', '0 1E+05\n1A5', 'jcamp-exponent-ambiguous'],
    ['a missing ordinate', '0 1 ? 3', 'jcamp-missing-ordinate'],
    ['a decimal comma', '1898,58486802541 -0,0170190036296844', 'jcamp-table-comma'],
    ['a strange letter', '0A1x5', 'jcamp-table-character'],
    ['a lone dollar sign', '0A1$5', 'jcamp-table-character'],
    ['a control character', '0A1\u001b5', 'jcamp-table-character'],
    ['a line without abscissa', 'A1J5', 'jcamp-table-character'],
    ['a line without ordinates', '0A1\n1\n', 'jcamp-table-syntax'],
    ['a difference first', '0J5', 'jcamp-table-syntax'],
    ['a repeat first', '0S5', 'jcamp-table-syntax'],
    ['a repeat of a repeat', '0A1TT', 'jcamp-table-syntax'],
    ['a repeat of a check ordinate', '0A1J\n1A2T', 'jcamp-table-syntax'],
    ['a lone sign', '0 1 - 2', 'jcamp-table-syntax'],
    ['a repeat count with a fraction', '0A1T.5', 'jcamp-repeat-limit'],
    ['a repeat beyond the stated points', '0A1s99999999', 'jcamp-repeat-limit'],
    ['a repeat of 1e12', '0A1S000000000000', 'jcamp-repeat-limit'],
    ['a repeat with 400 digits', `0A1S${'0'.repeat(400)}`, 'jcamp-repeat-limit'],
  ])('refuses %s', (_, line, code) => {
    expect(problemOf(walk(line)).code).toBe(code);
  });

  it('names the line of a fault', () => {
    const problem = problemOf(walk('0A1\r\n1A2\r\n\r\n2A3x'));
    expect([problem.where?.line, problem.message]).toEqual([4, 'line 4: the character "x" in the table']);
  });
});
