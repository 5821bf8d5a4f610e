import { invariant } from '../base/result.js';
import { affnNumber, encodeTable, type TableForm } from './encodeTable.js';

/** What a simulated JCAMP-DX file holds: the numbers and the facts of its header. */
export interface JcampFields {
  readonly kind: 'fid' | 'spectrum';
  readonly title: string;
  readonly nucleus: string;
  readonly observeMhz: number;
  /** shape (n) */
  readonly real: ArrayLike<number>;
  /** shape (n); absent: XYDATA with one channel. */
  readonly imag?: ArrayLike<number>;
  /** FID: seconds between points. */
  readonly dwellS?: number;
  /** Spectrum: abscissa of the first and the last point. */
  readonly axis?: { readonly unit: 'HZ' | 'PPM'; readonly first: number; readonly last: number };
  /** Text of LONGDATE. An ISO 8601 UTC time is rewritten as `YYYY/MM/DD HH:MM:SS+0000`. */
  readonly longDate?: string;
  readonly solvent?: string;
  readonly scans?: number;
  readonly acquisitionMode?: string;
  /** Text of .SHIFT REFERENCE, e.g. `INTERNAL, TMS, 1, 0`. */
  readonly shiftReference?: string;
  readonly temperatureC?: number;
  /** Further records as label and text, written before the data. */
  readonly records?: readonly (readonly [label: string, text: string])[];
}

export interface JcampOptions {
  /** Default DIFDUP. */
  readonly form?: TableForm;
  /** Default `\n`. */
  readonly lineEnd?: '\n' | '\r\n' | '\r';
  /** Largest integer in the table (default 2^24); numbers that are whole already stay as they are. */
  readonly integerMax?: number;
  /** Writes a spectrum from its other end: same spectrum, other header order. */
  readonly reversed?: boolean;
  readonly version?: string;
}

/**
 * Writes one acquisition as a JCAMP-DX 5.01 file: NTUPLES for two channels, XYDATA for one.
 *
 * @param fields numbers and header facts; a FID needs `dwellS`, a spectrum needs `axis`
 * @returns the text, ending with `##END=` and a line end; ASCII when the given texts are
 * @errors invariant: arrays of unequal length, fewer than two points, or numbers that are not finite
 * @source JCAMP-DX 4.24 section 5 (forms, checkpoints) and 5.00 (NMR records), see `src/decode`
 */
export function writeJcamp(fields: JcampFields, options: JcampOptions = {}): string {
  const { form = 'DIFDUP', lineEnd = '\n', integerMax = 2 ** 24, version = '5.01' } = options;
  const isReversed = options.reversed === true && fields.kind === 'spectrum';
  const axis = abscissa(fields, isReversed);
  const channels = [fields.real, ...(fields.imag ? [fields.imag] : [])].map((values) =>
    toIntegers(isReversed ? Array.from(values).reverse() : values, integerMax),
  );
  for (const { integers } of channels) invariant(integers.length === axis.count, 'channels must have equal length');
  const tables = channels.map(({ integers }) => encodeTable(integers, axis.firstCount, axis.stepCount, form));
  const body = fields.imag ? ntuples(fields, axis, channels, tables, form) : xyData(axis, channels[0]!, tables[0]!);
  return `${[...header(fields, version, fields.imag ? 'NTUPLES' : 'XYDATA'), ...body, '##END='].join(lineEnd)}${lineEnd}`;
}

interface Abscissa {
  readonly count: number;
  readonly unit: string;
  readonly first: number;
  readonly last: number;
  readonly factor: number;
  /** First abscissa and step in units of `factor`, as the table counts. */
  readonly firstCount: number;
  readonly stepCount: 1 | -1;
}

interface Channel {
  readonly integers: Float64Array;
  readonly factor: number;
  readonly min: number;
  readonly max: number;
}

function abscissa(fields: JcampFields, isReversed: boolean): Abscissa {
  const count = fields.real.length;
  invariant(count >= 2, 'a table needs two points');
  if (fields.kind === 'fid') {
    const { dwellS } = fields;
    invariant(dwellS !== undefined && dwellS > 0, 'a FID needs its dwell time');
    return { count, unit: 'SECONDS', first: 0, last: dwellS * (count - 1), factor: dwellS, firstCount: 0, stepCount: 1 };
  }
  invariant(fields.axis && fields.axis.first !== fields.axis.last, 'a spectrum needs its axis');
  const { unit } = fields.axis;
  const [first, last] = isReversed ? [fields.axis.last, fields.axis.first] : [fields.axis.first, fields.axis.last];
  const factor = Math.abs(last - first) / (count - 1);
  return { count, unit, first, last, factor, firstCount: first / factor, stepCount: last > first ? 1 : -1 };
}

function toIntegers(values: ArrayLike<number>, integerMax: number): Channel {
  let largest = 0;
  let isWhole = true;
  for (let k = 0; k < values.length; k += 1) {
    const value = values[k]!;
    invariant(Number.isFinite(value), 'a table holds finite numbers');
    largest = Math.max(largest, Math.abs(value));
    isWhole &&= Number.isInteger(value);
  }
  const factor = (isWhole && largest <= 2 ** 31) || largest === 0 ? 1 : largest / integerMax;
  const integers = Float64Array.from(values, (value) => Math.round(value / factor) + 0);
  let [min, max] = [Number.POSITIVE_INFINITY, Number.NEGATIVE_INFINITY];
  for (const value of integers) {
    min = Math.min(min, value);
    max = Math.max(max, value);
  }
  return { integers, factor, min: min * factor, max: max * factor };
}

function header(fields: JcampFields, version: string, dataClass: string): string[] {
  const optional: (readonly [label: string, text: string | number | undefined])[] = [
    ['LONGDATE', fields.longDate === undefined ? undefined : longDateText(fields.longDate)],
    ['.OBSERVE FREQUENCY', affnNumber(fields.observeMhz)],
    ['.OBSERVE NUCLEUS', fields.nucleus.replace(/^\^?/, '^')],
    ['.ACQUISITION MODE', fields.acquisitionMode ?? (fields.imag ? 'SIMULTANEOUS' : undefined)],
    ['.AVERAGES', fields.scans],
    ['.SOLVENT NAME', fields.solvent],
    ['.SHIFT REFERENCE', fields.shiftReference],
    ['TEMPERATURE', fields.temperatureC],
    ...(fields.records ?? []),
  ];
  return [
    `##TITLE= ${fields.title}`,
    `##JCAMP-DX= ${version}`,
    `##DATA TYPE= NMR ${fields.kind === 'fid' ? 'FID' : 'SPECTRUM'}`,
    `##DATA CLASS= ${dataClass}`,
    '##ORIGIN= simulated',
    '##OWNER= simulated',
    ...optional.filter(([, text]) => text !== undefined).map(([label, text]) => `##${label}= ${text}`),
  ];
}

/** `2026-03-14T19:31:00.5Z` as `2026/03/14 19:31:00.5+0000`; any other text as it is. */
function longDateText(text: string): string {
  const match = /^(\d{4})-(\d\d)-(\d\d)T(\d\d:\d\d:\d\d(?:\.\d+)?)Z$/.exec(text);
  return match ? `${match[1]}/${match[2]}/${match[3]} ${match[4]}+0000` : text;
}

function xyData(axis: Abscissa, channel: Channel, table: string[]): string[] {
  const { first, last, factor, count } = axis;
  return [
    `##XUNITS= ${axis.unit}`,
    '##YUNITS= ARBITRARY UNITS',
    `##XFACTOR= ${affnNumber(factor)}`,
    `##YFACTOR= ${affnNumber(channel.factor)}`,
    `##FIRSTX= ${affnNumber(first)}`,
    `##LASTX= ${affnNumber(last)}`,
    `##DELTAX= ${affnNumber((last - first) / (count - 1))}`,
    `##MAXY= ${affnNumber(channel.max)}`,
    `##MINY= ${affnNumber(channel.min)}`,
    `##NPOINTS= ${count}`,
    `##FIRSTY= ${affnNumber(channel.integers[0]! * channel.factor)}`,
    '##XYDATA= (X++(Y..Y))',
    ...table,
  ];
}

function ntuples(fields: JcampFields, axis: Abscissa, channels: Channel[], tables: string[][], form: TableForm): string[] {
  const name = fields.kind === 'fid' ? 'NMR FID' : 'NMR SPECTRUM';
  const [variable, prefix] = fields.kind === 'fid' ? ['TIME', 'FID'] : ['FREQUENCY', 'SPECTRUM'];
  const row = (x: string | number, pick: (channel: Channel) => string | number, page: string | number) =>
    [x, ...channels.map(pick), page].map((value) => (typeof value === 'number' ? affnNumber(value) : value)).join(', ');
  const tableForm = form === 'AFFN' ? 'AFFN' : 'ASDF';
  return [
    `##NTUPLES= ${name}`,
    `##VAR_NAME= ${variable}, ${prefix}/REAL, ${prefix}/IMAG, PAGE NUMBER`,
    '##SYMBOL= X, R, I, N',
    '##VAR_TYPE= INDEPENDENT, DEPENDENT, DEPENDENT, PAGE',
    `##VAR_FORM= AFFN, ${tableForm}, ${tableForm}, AFFN`,
    `##VAR_DIM= ${row(axis.count, () => axis.count, 2)}`,
    `##UNITS= ${axis.unit}, ARBITRARY UNITS, ARBITRARY UNITS,`,
    `##FIRST= ${row(axis.first, ({ integers, factor }) => integers[0]! * factor, 1)}`,
    `##LAST= ${row(axis.last, ({ integers, factor }) => integers.at(-1)! * factor, 2)}`,
    `##MIN= ${row(Math.min(axis.first, axis.last), ({ min }) => min, 1)}`,
    `##MAX= ${row(Math.max(axis.first, axis.last), ({ max }) => max, 2)}`,
    `##FACTOR= ${row(axis.factor, ({ factor }) => factor, 1)}`,
    ...tables.flatMap((table, page) => [
      `##PAGE= N=${page + 1}`,
      `##DATA TABLE= (X++(${'RI'[page]}..${'RI'[page]})), XYDATA`,
      ...table,
    ]),
    `##END NTUPLES= ${name}`,
  ];
}
