import { describe, expect, it } from 'vitest';
import {
  decoded,
  decodeText,
  fidFields,
  fidText,
  flagCodes,
  refusal,
  spectrumFields,
  spectrumText,
  unwrap,
} from './sampleFile.js';

const fid = fidText();
const spectrum = spectrumText();
const changed = (text: string, from: string | RegExp, to: string) => {
  const other = text.replace(from, () => to);
  expect(other).not.toBe(text);
  return other;
};

describe('the header', () => {
  it('is read with leading blanks, tabs and other spellings of the labels', () => {
    const odd = fid
      .replace(/^##/gm, ' \t##')
      .replace('##.OBSERVE FREQUENCY=', '##.Observe_Frequency =')
      .replace('##DATA TYPE=', '##data-type=')
      .replace('##VAR_DIM=', '##VARDIM=')
      .replace('##DATA TABLE=', '##DATA/TABLE=');
    expect(decoded(odd)).toEqual(decoded(fid));
  });

  it('is read with a byte order mark, comments and blank lines', () => {
    const odd = fid
      .replace(/^##\.OBSERVE FREQUENCY=.*$/m, () => '##.OBSERVE FREQUENCY= 400.13 $$ MHz')
      .replace('##ORIGIN=', () => '\n$$ a comment ## with marks\n\n##= a comment record\n##ORIGIN=');
    expect(decoded(`\xef\xbb\xbf${odd}`)).toEqual(decoded(fid));
  });

  it('keeps the comments of a table away from its numbers', () => {
    const odd = spectrumText({ form: 'PAC' }).replace(/(\(X\+\+\(Y\.\.Y\)\)\n)(.*)\n/, '$1$$$$ scan 1\n  $2 $$$$ 17 18\n\n');
    expect(decoded(odd).real).toEqual(spectrumFields.real);
  });

  it('keeps a title in UTF-8 or Latin-1, on several lines', () => {
    const utf8 = changed(fid, /^##TITLE=.*$/m, `##TITLE= ${Buffer.from('Größe µ').toString('latin1')}\nzweite`);
    expect(decoded(utf8).title).toBe('Größe µ zweite');
    expect(decoded(changed(fid, /^##TITLE=.*$/m, '##TITLE= Gr\xf6\xdfe')).title).toBe('Größe');
  });

  it('keeps labels such as __proto__ and constructor as plain data', () => {
    const odd = changed(
      fid,
      '##ORIGIN=',
      '##__proto__= {"polluted": 1}\n##constructor= x\n##toString= 5\n##$__proto__= private\n##ORIGIN=',
    );
    expect(decoded(odd)).toEqual(decoded(fid));
    expect(({} as Record<string, unknown>).polluted).toBeUndefined();
    const read = unwrap(decodeText(odd, ['$__proto__', '$carrier', '__proto__']));
    expect(Object.entries(read.privateRecords!)).toEqual([
      ['$__proto__', 'private'],
      ['__proto__', '{"polluted": 1}'],
    ]);
    expect(Object.getPrototypeOf(read.privateRecords!)).toBe(null);
  });

  it('holds private records back unless they are asked for', () => {
    const odd = changed(fid, '##ORIGIN=', '##$Carrier_ppm= 4.7 $$ set at the console\n##$secret= 1\n##ORIGIN=');
    expect(decoded(odd).privateRecords).toBeUndefined();
    expect({ ...unwrap(decodeText(odd, ['$CARRIER PPM'])).privateRecords }).toEqual({ '$CARRIER PPM': '4.7' });
  });

  it.each([
    ['^1H', '1H'],
    ['1H', '1H'],
    ['H1', '1H'],
    ['<13C>', '13C'],
    ['^19f', '19F'],
    ['29SI', '29Si'],
  ])('names the nucleus of %s', (text, nucleus) => {
    expect(decoded(fid.replace('^1H', text)).nucleus).toBe(nucleus);
  });

  it('passes over what it need not understand, and says so', () => {
    const odd = changed(changed(fid, '^1H', 'proton'), '##.AVERAGES= 16', '##.AVERAGES= many\n##.SHIFT REFERENCE= TMS');
    const read = decoded(odd);
    expect([read.nucleus, read.scans, read.shiftReference]).toEqual([undefined, undefined, undefined]);
    expect(flagCodes(read)).toEqual(Array(3).fill('jcamp-value-unreadable'));
    expect(read.flags.every(({ weight }) => weight === 'note')).toBe(true);
  });

  it('reads a decimal comma where it can mean nothing else', () => {
    const read = decoded(changed(fid, '400.13', '400,13'));
    expect([read.observeMhz, flagCodes(read)]).toEqual([400.13, ['jcamp-decimal-comma']]);
    const comma = decoded(changed(spectrum, /^##FIRSTX=.*$/m, '##FIRSTX= 4801,56'));
    expect(comma.axis).toEqual(decoded(spectrum).axis);
  });

  it('reads lists with decimal commas where blanks separate the entries', () => {
    const read = decoded(changed(fid, /^##FACTOR=.*$/m, '##FACTOR= 0,0002088, 1, 1, 1'));
    expect([read.dwellS, flagCodes(read)]).toEqual([0.0002088, ['jcamp-decimal-comma']]);
  });

  it.each([
    ['a number with three digits after a comma', '400.13', '400,132', 'jcamp-comma-ambiguous', '.OBSERVE FREQUENCY'],
    ['a list with decimal commas and no blanks', /^##FACTOR=.*$/m, '##FACTOR=0,0002088,1,1,1', 'jcamp-list-length', 'FACTOR'],
    ['a list with an entry too many', /^##FIRST=.*$/m, '##FIRST= 0, 1, 2, 3, 4', 'jcamp-list-length', 'FIRST'],
    ['a frequency that is no number', '400.13', 'four hundred', 'jcamp-number', '.OBSERVE FREQUENCY'],
    ['a frequency of NaN', '400.13', 'NaN', 'jcamp-number', '.OBSERVE FREQUENCY'],
    ['a frequency in hertz', '400.13', '400130000', 'jcamp-number', '.OBSERVE FREQUENCY'],
    ['a frequency of zero', '400.13', '0', 'jcamp-number', '.OBSERVE FREQUENCY'],
    ['an endless factor', /^##FACTOR=.*$/m, '##FACTOR= 1e400, 1, 1, 1', 'jcamp-number', 'FACTOR'],
    ['a factor of zero', /^##FACTOR=.*$/m, '##FACTOR= 0, 1, 1, 1', 'jcamp-axis', undefined],
    ['time in an unknown unit', 'UNITS= SECONDS', 'UNITS= FORTNIGHTS', 'jcamp-units', 'UNITS'],
    ['time in hertz', 'UNITS= SECONDS', 'UNITS= HZ', 'jcamp-units', 'UNITS'],
    ['no number of points', /^##VAR_DIM=.*\n/m, '', 'jcamp-record-missing', 'VAR_DIM'],
    ['no factors', /^##FACTOR=.*\n/m, '', 'jcamp-record-missing', 'FACTOR'],
    ['no first abscissa', /^##FIRST=.*\n/m, '', 'jcamp-record-missing', 'FIRST'],
    ['no symbols', /^##SYMBOL=.*\n/m, '', 'jcamp-record-missing', 'SYMBOL'],
    ['no data type', /^##DATA TYPE=.*\n/m, '', 'jcamp-record-missing', 'DATA TYPE'],
    ['half a point', /^##VAR_DIM=.*$/m, '##VAR_DIM= 300.5, 300.5, 300.5, 2', 'jcamp-number', 'VAR_DIM'],
    ['one point', /^##VAR_DIM=.*$/m, '##VAR_DIM= 1, 1, 1, 2', 'jcamp-too-few-points', 'VAR_DIM'],
    ['1e15 points', /^##VAR_DIM=.*$/m, '##VAR_DIM= 1e15, 1e15, 1e15, 2', 'jcamp-too-many-points', 'VAR_DIM'],
    ['299 points', /^##VAR_DIM=.*$/m, '##VAR_DIM= 299, 299, 299, 2', 'jcamp-point-count', 'DATA TABLE'],
    ['301 points', /^##VAR_DIM=.*$/m, '##VAR_DIM= 301, 301, 301, 2', 'jcamp-point-count', 'DATA TABLE'],
    ['a record twice', '##ORIGIN=', '##.OBSERVE FREQUENCY= 500\n##ORIGIN=', 'jcamp-record-twice', '.OBSERVE FREQUENCY'],
    ['an unknown page variable', '(X++(I..I))', '(X++(Q..Q))', 'jcamp-pages', 'DATA TABLE'],
    ['the real page twice', '(X++(I..I))', '(X++(R..R))', 'jcamp-pages', undefined],
    ['another table form', '(X++(R..R))', '(XR..XR)', 'jcamp-table-form', 'DATA TABLE'],
    ['one page too few', /##PAGE= N=2\n[^#]*##DATA TABLE=[^#]*/, '', 'jcamp-pages', undefined],
    ['a line with marks and no equals sign', '##ORIGIN=', '##ORIGIN ', 'jcamp-record-malformed', undefined],
  ])('of a FID is refused for %s', (_, from, to, code, label) => {
    const problem = refusal(changed(fid, from, to));
    expect(problem.code).toBe(code);
    expect([problem.where?.file, problem.where?.label?.replace('VARDIM', 'VAR_DIM')]).toEqual(['sample.jdx', label]);
  });

  it.each([
    ['FIRSTX equal to LASTX', /^##FIRSTX=.*$/m, '##FIRSTX= -800.26', 'jcamp-axis'],
    ['a digit of FIRSTX', /^##FIRSTX=.*$/m, '##FIRSTX= 4811.56', 'jcamp-axis'],
    ['a digit of LASTX', /^##LASTX=.*$/m, '##LASTX= -800.36', 'jcamp-axis'],
    ['a digit of XFACTOR', /^##XFACTOR=.*$/m, '##XFACTOR= 18.7392', 'jcamp-axis'],
    ['a digit of DELTAX', /^##DELTAX=.*$/m, '##DELTAX= -18.7452', 'jcamp-axis'],
    ['a digit of FIRSTY', /^##FIRSTY=.*$/m, '##FIRSTY= 765716', 'jcamp-first-ordinate'],
    ['a digit of MAXY', /^##MAXY=.*$/m, '##MAXY= 999999', 'jcamp-extreme-ordinate'],
    ['a digit of YFACTOR', /^##YFACTOR=.*$/m, '##YFACTOR= 2', 'jcamp-first-ordinate'],
    ['no FIRSTX', /^##FIRSTX=.*\n/m, '', 'jcamp-record-missing'],
    ['no XUNITS', /^##XUNITS=.*\n/m, '', 'jcamp-units'],
    ['no YFACTOR', /^##YFACTOR=.*\n/m, '', 'jcamp-record-missing'],
    ['points of unequal spacing', '(X++(Y..Y))', '(XY..XY)', 'jcamp-table-form'],
    ['unequal spacing by class', '##DATA CLASS= XYDATA', '##DATA CLASS= XYPOINTS', 'jcamp-unsupported'],
    ['a unit that is not frequency', '##XUNITS= HZ', '##XUNITS= 1/CM', 'jcamp-units'],
    ['no observe frequency for ppm', /^##\.OBSERVE FREQUENCY=.*\n##/m, '##', 'none'],
  ])('of a spectrum is refused for %s', (_, from, to, code) => {
    const result = decodeText(changed(spectrum, from, to));
    expect(result.ok ? 'none' : result.problem.code).toBe(code);
  });

  it('needs the observe frequency only where ppm are to become hertz', () => {
    const ppm = spectrumText({}, { axis: { unit: 'PPM', first: 12, last: -2 } });
    expect(decoded(ppm).axis).toEqual({ firstPpm: 12, lastPpm: -2 });
    expect(decoded(ppm).spectralWidthHz).toBeCloseTo((14 / 299) * 300 * 400.13, 9);
    expect(refusal(changed(ppm, /^##\.OBSERVE FREQUENCY=.*\n/m, '')).code).toBe('jcamp-record-missing');
    expect(decoded(changed(spectrum, /^##\.OBSERVE FREQUENCY=.*\n/m, '')).axis).toBeUndefined();
  });

  it('refuses time that runs backwards', () => {
    const odd = changed(changed(fid, /^##FIRST= 0,/m, '##FIRST= 0.0624312,'), /^##LAST= [^,]*,/m, '##LAST= 0,');
    expect(refusal(odd)).toMatchObject({ code: 'jcamp-axis', message: 'time runs backwards, from 0.0624312 to 0' });
  });

  it('reads a shift reference whose compound holds commas', () => {
    const read = decoded(
      changed(fid, '##ORIGIN=', '##.SHIFT REFERENCE= (external, 2,2-dimethyl-2-silapentane, 12, -0.5)\n##ORIGIN='),
    );
    expect(read.shiftReference).toEqual({
      place: 'external',
      compound: '2,2-dimethyl-2-silapentane',
      pointNumber: 12,
      shiftPpm: -0.5,
    });
  });

  it.each([
    ['INTERNAL, CDCl3, 1, 8,914285', 'CDCl3', 8.914285],
    ['INTERNAL,CDCl3,1,8.914285', 'CDCl3', 8.914285],
    ['INTERNAL, 2,2-dimethyl-2-silapentane, 1, 0', '2,2-dimethyl-2-silapentane', 0],
    ['INTERNAL,CDCl3,1,8,914285', undefined, undefined],
    ['INTERNAL, CDCl3, 1, 8,914', undefined, undefined],
    ['INTERNAL, CDCl3, 1.5, 8.9', undefined, undefined],
  ])('reads the shift reference %s, or passes it over', (text, compound, shiftPpm) => {
    const { shiftReference, flags } = decoded(changed(fid, '##ORIGIN=', `##.SHIFT REFERENCE= ${text}\n##ORIGIN=`));
    expect([shiftReference?.compound, shiftReference?.shiftPpm]).toEqual([compound, shiftPpm]);
    expect(flags.length > 0).toBe(shiftReference === undefined || text.includes('8,'));
  });

  it('notes extremes of the abscissa that are not its ends', () => {
    expect(flagCodes(decoded(changed(spectrum, '##NPOINTS', '##MAXX= 4801.56\n##MINX= -800.26\n##NPOINTS')))).toEqual([]);
    expect(flagCodes(decoded(changed(spectrum, '##NPOINTS', '##MAXX= 4901.56\n##NPOINTS')))).toEqual(['jcamp-extremes-header']);
  });

  it.each([
    ['MILLISECONDS', 1e-3],
    ['s', 1],
    ['us', 1e-6],
  ])('reads time in %s', (unit, scale) => {
    expect(decoded(changed(fid, 'UNITS= SECONDS', `UNITS= ${unit}`)).dwellS).toBeCloseTo(fidFields.dwellS! * scale, 15);
  });

  it('keeps a FID of one channel with its acquisition mode', () => {
    const { imag: _, ...real } = fidFields;
    const read = decoded(fidText({}, { ...real, imag: undefined as never, acquisitionMode: 'SINGLE' }));
    expect([read.kind, read.imag, read.acquisitionMode, read.dwellS]).toEqual(['fid', undefined, 'single', fidFields.dwellS]);
  });

  it.each([
    ['01/02/2026 10:00:00', 'none', 'jcamp-date-unreadable', 'flag'],
    ['2026/02/01 10:00:00', 'long-date', 'jcamp-time-zone-missing', 'note'],
    ['2026/02/01', 'date-only', undefined, undefined],
  ])('takes the time of acquisition %s as %s', (text, source, code, weight) => {
    const read = decoded(changed(fid, /^##LONGDATE=.*$/m, `##LONG DATE= ${text}`));
    expect([read.acquiredSource, read.flags[0]?.code, read.flags[0]?.weight]).toEqual([source, code, weight]);
  });

  it('falls back from LONGDATE to DATE and TIME', () => {
    const read = decoded(changed(fid, /^##LONGDATE=.*$/m, '##LONGDATE= soon\n##DATE= 2026/03/14\n##TIME= 19:31:00'));
    expect([read.acquired, read.acquiredSource]).toEqual(['2026-03-14T19:31:00Z', 'date-and-time']);
    expect(flagCodes(read)).toEqual(['jcamp-date-unreadable', 'jcamp-time-zone-missing']);
  });

  it('gives the same hash for the same data under another header, and another for another axis', () => {
    const { dataSha256 } = decoded(fid);
    expect(decoded(changed(fid, '30 min', '60 min')).dataSha256).toBe(dataSha256);
    expect(decoded(fidText({}, { dwellS: 0.0002089 })).dataSha256).not.toBe(dataSha256);
    expect(decoded(fidText({}, { nucleus: '19F' })).dataSha256).not.toBe(dataSha256);
  });

  it('uses the last point of the table where LASTX lies one step beyond, and says so', () => {
    const step = (4801.56 + 800.26) / 299;
    const read = decoded(changed(spectrum, /^##LASTX=.*$/m, `##LASTX= ${-800.26 - step}`));
    expect(read.axis!.lastPpm).toBeCloseTo(-800.26 / 400.13, 9);
    expect(flagCodes(read)).toEqual(['jcamp-last-abscissa']);
  });

  it('flags a frequency that does not belong to field and nucleus', () => {
    const stated = (fieldT: number) => flagCodes(decoded(changed(fid, '##ORIGIN=', `##.FIELD= ${fieldT}\n##ORIGIN=`)));
    // 400.13 MHz / 42.577 MHz/T = 9.398 T
    expect([stated(9.4), stated(9.398), stated(11.7)]).toEqual([[], [], ['jcamp-field']]);
  });

  it('notes a factor that is rounded, and uses FIRST and LAST', () => {
    const read = decoded(changed(fid, /^##FACTOR= 0.0002088,/m, '##FACTOR= 0.000209,'));
    expect([read.dwellS, flagCodes(read)]).toEqual([0.0002088, ['jcamp-step-rounded']]);
  });

  it('notes a first line that starts beside FIRST', () => {
    const read = decoded(changed(spectrumText({ form: 'AFFN' }), /^(256\.)\d+/m, '256.5'));
    expect(flagCodes(read)).toEqual(['jcamp-first-abscissa']);
  });

  it('shows control characters of the file as text in messages', () => {
    const problem = refusal(changed(fid, '400.13', '\u001b]52;c;x\u0007'));
    expect(problem.message).toContain('"\\x1b]52;c;x\\x07"');
  });
});
