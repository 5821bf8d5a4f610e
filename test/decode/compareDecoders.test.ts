import { describe, expect, it } from 'vitest';
import { decoded, refusal } from './sampleFile.js';

const file = (table: string, points: number) =>
  [
    '##TITLE= invented',
    '##JCAMP-DX= 5.01',
    '##DATA TYPE= NMR SPECTRUM',
    '##DATA CLASS= XYDATA',
    '##.OBSERVE FREQUENCY= 400.13',
    '##XUNITS= HZ',
    '##XFACTOR= 1',
    '##YFACTOR= 0.5',
    '##FIRSTX= 0',
    `##LASTX= ${points - 1}`,
    `##NPOINTS= ${points}`,
    '##XYDATA= (X++(Y..Y))',
    table,
    '##END=',
    '',
  ].join('\n');

describe('the second decoder', () => {
  it('agrees on powers of ten, which it is shown written out', () => {
    expect([...decoded(file('0 1.5E+03 -2.5E-02 3E+00\n3 12.25e+01 7', 5)).real]).toEqual([750, -0.0125, 1.5, 61.25, 3.5]);
  });

  it('agrees on decimals to a part in 1e9, and the nearest doubles are kept', () => {
    expect([...decoded(file('0 0.1 0.2 0.3 -0.000111519', 4)).real]).toEqual([0.05, 0.1, 0.15, -0.0000557595]);
  });

  it('agrees on decimal differences', () => {
    expect([...decoded(file('0A.5J.25%j.25\n3A.5', 4)).real]).toEqual([0.75, 1.375, 1.375, 0.75]);
  });

  it('leads to a refusal where it reads another number: a plain value after a difference', () => {
    const problem = refusal(file('0A1J 5', 3));
    expect(problem).toMatchObject({
      code: 'jcamp-decoders-disagree',
      message: 'two decoders read point 3 of the table at line 12 as 2.5 and 6.5',
      where: { line: 12 },
    });
  });
});
