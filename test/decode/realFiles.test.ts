import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import type { Acquisition } from '../../src/decode/acquisition.js';
import { decodeJcamp } from '../../src/decode/decodeJcamp.js';
import { dataFolder, decoded, decodeText, fileBytes, flagCodes, single, unwrap } from './sampleFile.js';

interface TableSummary {
  readonly points: number;
  readonly first: number[];
  readonly last: number[];
  readonly min: number;
  readonly max: number;
  readonly sum: number;
  readonly weightedSum: number;
}

// Decoded by test/reference/decode/decode_tables.py, which shares nothing with src/decode.
const reference = JSON.parse(
  readFileSync(join(import.meta.dirname, '..', 'reference', 'decode', 'tables.json'), 'utf8'),
) as Record<string, TableSummary[]>;
const names = readdirSync(dataFolder, { recursive: true, encoding: 'utf8' }).filter((name) => /\.j?dx$/.test(name));
const read = (name: string): Acquisition => unwrap(single(decodeJcamp(fileBytes(name), name)));

/** FACTOR of each page, from the header text. */
function factorsOf(name: string): number[] {
  const text = readFileSync(join(dataFolder, name), 'latin1');
  const list = /^##FACTOR *=(.*)$/m.exec(text)?.[1];
  return list ? list.split(',').slice(1, 3).map(Number) : [Number(/^##YFACTOR *=(.*)$/m.exec(text)![1])];
}

describe('real files', () => {
  it('all have a row of provenance and a reference', () => {
    const rows = readFileSync(join(dataFolder, 'PROVENANCE.csv'), 'utf8');
    expect(names.filter((name) => !rows.includes(`\n${name},`))).toEqual([]);
    expect(Object.keys(reference).sort()).toEqual([...names].sort());
  });

  it.each(names)('%s holds the numbers that an independent decoder finds', (name) => {
    const { real, imag } = read(name);
    const channels = imag ? [real, imag] : [real];
    const factors = factorsOf(name);
    expect(channels.length).toBe(reference[name]!.length);
    channels.forEach((values, index) => {
      const expected = reference[name]![index]!;
      const factor = factors[index]!;
      expect(values.length).toBe(expected.points);
      expect([...values.slice(0, 4)]).toEqual(expected.first.map((value) => value * factor));
      expect([...values.slice(-3)]).toEqual(expected.last.map((value) => value * factor));
      expect(values.reduce((low, value) => Math.min(low, value))).toBe(expected.min * factor);
      expect(values.reduce((high, value) => Math.max(high, value))).toBe(expected.max * factor);
      const scale = values.reduce((sum, value) => sum + Math.abs(value), 0);
      expect(Math.abs(values.reduce((sum, value) => sum + value, 0) - expected.sum * factor)).toBeLessThan(1e-12 * scale);
      const weighted = values.reduce((sum, value, k) => sum + value * (k % 97), 0);
      expect(Math.abs(weighted - expected.weightedSum * factor)).toBeLessThan(97e-12 * scale);
    });
  });

  it.each([
    ['one spectrum fixed, squeezed and as differences', ['o01', 'o02', 'o03', 'o05']],
    ['one complex spectrum in two forms', ['o06', 'o10']],
    ['one FID in two forms', ['ofid1', 'ofid4']],
    ['one 1H spectrum in two forms', ['compression-difdup', 'compression-fix']],
  ])('hold %s with identical numbers', (_, group) => {
    const [first, ...others] = group.map((name) => read(`conformance/${name}.jdx`));
    for (const other of others) {
      expect(other.real).toEqual(first!.real);
      expect(other.imag).toEqual(first!.imag);
      expect(other.dataSha256).toBe(first!.dataSha256);
    }
  });

  it('place a FID by its dwell time and standard records', () => {
    const { real, imag, dataSha256, flags, ...facts } = read('instruments/60mhz-bench-fid.jdx');
    expect(facts).toEqual({
      kind: 'fid',
      title: 'Ibuprofen in CDCl3',
      nucleus: '1H',
      observeMhz: 60.12396860678224,
      dwellS: 0.0011599999706959352,
      spectralWidthHz: 1 / 0.0011599999706959352,
      shiftReference: { place: 'internal', compound: 'Chloroform-d', pointNumber: 1024, shiftPpm: 6 },
      solventName: 'Chloroform-d',
      scans: 64,
      temperatureC: 33.000009,
      acquisitionTimeS: 2.37451994001458,
      fieldT: 1.412173,
      acquisitionMode: 'simultaneous',
      acquired: '2023-10-08T15:01:32Z',
      acquiredSource: 'long-date',
    });
  });

  it('place a spectrum by its reference point', () => {
    const { axis, kind, spectralWidthHz } = read('compounds/acetylsalicylic-acid/spectrum.dx');
    expect(kind).toBe('complex-spectrum');
    // 4789.12587366797 Hz over 32767 steps at 300.132250975 MHz, first point at 15.47866 ppm.
    expect(axis!.firstPpm).toBe(15.47866);
    expect(axis!.lastPpm).toBeCloseTo(15.47866 - 4789.12587366797 / 300.132250975, 9);
    expect(spectralWidthHz).toBeCloseTo((4789.12587366797 / 32767) * 32768, 6);
  });

  it('say what was tolerated', () => {
    const tolerated = Object.fromEntries(
      names.map((name) => [name, flagCodes(read(name))]).filter(([, codes]) => codes!.length > 0),
    );
    expect(tolerated).toEqual({
      'compounds/acetylsalicylic-acid/fid.dx': ['jcamp-extremes-header', 'jcamp-extremes-header'],
      'compounds/acetylsalicylic-acid/spectrum.dx': ['jcamp-extremes-header'],
      'compounds/ethyl-crotonate/fid.dx': ['jcamp-extremes-header', 'jcamp-extremes-header'],
      'compounds/ethyl-crotonate/spectrum.dx': ['jcamp-extremes-header'],
      'compounds/ethyl-propiolate/fid.dx': ['jcamp-extremes-header'],
      'compounds/ethyl-propiolate/spectrum.dx': ['jcamp-extremes-header'],
      'conformance/ofid4.jdx': ['jcamp-abscissa-coarse'],
      'instruments/300mhz-ascending-header.jdx': [
        'jcamp-point-count-header',
        'jcamp-abscissa-counts',
        'jcamp-ordinate-header',
        'jcamp-ordinate-header',
        'jcamp-ordinate-header',
      ],
      'instruments/400mhz-sequential.jdx': [
        'jcamp-time-zone-missing',
        'jcamp-delta-sign',
        'jcamp-abscissa-counts',
        'jcamp-ordinate-header',
      ],
    });
  });

  it.each(names)('%s reads the same with blanks before its labels and other line ends', (name) => {
    const text = readFileSync(join(dataFolder, name), 'latin1').replaceAll('\r\n', '\n');
    const { dataSha256 } = read(name);
    for (const odd of [text.replace(/^##/gm, '  ##').replaceAll('\n', '\r\n'), text.replaceAll('\n', '\r')])
      expect(decoded(odd).dataSha256).toBe(dataSha256);
  });

  it.each(names)('%s with a decimal comma in any header line is understood or refused', (name) => {
    const lines = readFileSync(join(dataFolder, name), 'latin1').split('\n');
    const { dataSha256 } = read(name);
    lines.forEach((line, index) => {
      const at = line.indexOf('=');
      if (!line.startsWith('##') || !/\d\.\d/.test(line.slice(at)) || /TITLE|JCAMP|DATE/.test(line)) return;
      const changed = line.slice(0, at) + line.slice(at).replace(/(\d)\.(\d)/g, '$1,$2');
      const result = decodeText(lines.with(index, changed).join('\n'));
      if (result.ok) expect(result.value.dataSha256, line).toBe(dataSha256);
      else expect(['jcamp-comma-ambiguous', 'jcamp-list-length'], line).toContain(result.problem.code);
    });
  });
});
