import { convert } from 'jcampconverter';
import { describe, expect, it } from 'vitest';
import { encodeTable } from '../../src/simulate/encodeTable.js';
import { writeJcamp } from '../../src/simulate/writeJcamp.js';

describe('encodeTable', () => {
  // Published example: McDonald, Wilks, Appl. Spectrosc. 1988, 42, 151, table VIIb.
  const values = [1, 2, 3, 3, 2, 1, 0, -1, -2, -3];

  it('writes table VIIb in every form', () => {
    expect(encodeTable(values, 0, 1, 'AFFN')).toEqual(['0 1 2 3 3 2 1 0 -1 -2 -3']);
    expect(encodeTable(values, 0, 1, 'PAC')).toEqual(['0+1+2+3+3+2+1+0-1-2-3']);
    expect(encodeTable(values, 0, 1, 'SQZ')).toEqual(['0ABCCBA@abc']);
    expect(encodeTable(values, 0, 1, 'DIF')).toEqual(['0AJJ%jjjjjj', '9c  $$ checkpoint']);
    expect(encodeTable(values, 0, 1, 'DIFDUP')).toEqual(['0AJT%jX', '9c  $$ checkpoint']);
  });

  it('repeats the last ordinate of a difference line at its own abscissa', () => {
    const rising = Array.from({ length: 60 }, (_, k) => k * k * 1000);
    const lines = encodeTable(rising, 59, -1, 'DIF');
    const second = /^(\d+)([A-I]\d+)/.exec(lines[1]!)!;
    const index = 59 - Number(second[1]);
    const squeezed = String(rising[index]);
    expect(second[2]).toBe('@ABCDEFGHI'[Number(squeezed[0])]! + squeezed.slice(1));
    expect(Math.max(...lines.slice(0, -1).map(({ length }) => length))).toBeLessThanOrEqual(80);
  });
});

describe('writeJcamp', () => {
  const real = Float64Array.from({ length: 300 }, (_, k) => Math.round(1e6 * Math.cos(k / 7)));
  const imag = Float64Array.from({ length: 300 }, (_, k) => Math.round(1e6 * Math.sin(k / 7)));
  const facts = { title: 'invented', nucleus: '1H', observeMhz: 400.13, longDate: '2026-03-14T19:31:00Z' } as const;

  it.each(['AFFN', 'PAC', 'SQZ', 'DIF', 'DIFDUP'] as const)(
    'writes a FID as %s that jcampconverter reads back exactly',
    (form) => {
      const text = writeJcamp({ ...facts, kind: 'fid', real, imag, dwellS: 2e-4 }, { form });
      const [entry] = convert(text).flatten;
      expect(entry!.spectra.map(({ data }) => data.y)).toEqual([Array.from(real), Array.from(imag)]);
      expect(text).toContain('##LONGDATE= 2026/03/14 19:31:00+0000');
    },
  );

  it('writes the same spectrum from either end', () => {
    const fields = { ...facts, kind: 'spectrum', real, axis: { unit: 'PPM', first: 12, last: -2 } } as const;
    const forward = convert(writeJcamp(fields)).flatten[0]!.spectra[0]!;
    const backward = convert(writeJcamp(fields, { reversed: true })).flatten[0]!.spectra[0]!;
    expect(backward.data.y).toEqual([...forward.data.y!].reverse());
    expect([forward.firstX, backward.firstX]).toEqual([12, -2]);
  });

  it('scales numbers that are not whole to the largest integer asked for', () => {
    const text = writeJcamp(
      { ...facts, kind: 'fid', real: [0.5, -0.25, 1], imag: [0, 0, 0], dwellS: 1e-3 },
      { integerMax: 1000 },
    );
    expect(text).toContain('##FACTOR= 0.001, 0.001, 1, 1');
    expect(convert(text).flatten[0]!.spectra[0]!.data.y).toEqual([0.5, -0.25, 1]);
  });
});
