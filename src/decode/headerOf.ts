import type { Flag } from '../base/flag.js';
import { ok, type Result } from '../base/result.js';
import { refuse, shown, tolerated } from './jcampProblem.js';
import { type HeaderNumber, parseNumber } from './parseNumber.js';
import { recordText } from './recordText.js';
import type { JcampRecord } from './walkRecords.js';

/** The records of one block by label, with the flags that reading them raised. Labels are data: a Map, never object keys. */
export interface Header {
  readonly bytes: Uint8Array;
  readonly records: ReadonlyMap<string, JcampRecord>;
  readonly flags: Flag[];
}

/** Records that say where the numbers lie: said twice in two ways, none can be believed. */
const essential = new Set(
  'DATATYPE DATACLASS NPOINTS FIRSTX LASTX DELTAX XFACTOR YFACTOR FIRSTY LASTY MINY MAXY XUNITS NTUPLES SYMBOL VARNAME VARDIM UNITS FIRST LAST MIN MAX FACTOR .OBSERVEFREQUENCY .OBSERVENUCLEUS'.split(
    ' ',
  ),
);

/**
 * Indexes the records of a block; the first of each label counts.
 *
 * @errors jcamp-record-twice
 */
export function headerOf(bytes: Uint8Array, records: readonly JcampRecord[]): Result<Header> {
  const byLabel = new Map<string, JcampRecord>();
  for (const record of records) {
    const earlier = byLabel.get(record.label);
    if (!earlier) byLabel.set(record.label, record);
    else if (essential.has(record.label) && recordText(bytes, earlier) !== recordText(bytes, record))
      return refuse(
        'jcamp-record-twice',
        `##${record.writtenLabel}= is "${shown(recordText(bytes, earlier))}" at line ${earlier.line} and "${shown(recordText(bytes, record))}" at line ${record.line}`,
        { line: record.line, label: record.writtenLabel },
      );
  }
  return ok({ bytes, records: byLabel, flags: [] });
}

/** Text of a record; undefined when it is missing or empty. */
export function headerText(header: Header, label: string): string | undefined {
  const record = header.records.get(label);
  const text = record ? recordText(header.bytes, record) : '';
  return text === '' ? undefined : text;
}

/**
 * A number that the decoding rests on: undefined when absent, refused when it is not one.
 *
 * @errors jcamp-number, jcamp-comma-ambiguous
 */
export function headerNumber(header: Header, label: string): Result<HeaderNumber | undefined> {
  const record = header.records.get(label);
  const text = headerText(header, label);
  if (!record || text === undefined) return ok(undefined);
  return numberOf(header, record, text);
}

/** A number that must be there. @errors jcamp-record-missing, and those of `headerNumber` */
export function requiredNumber(header: Header, label: string): Result<HeaderNumber> {
  const found = headerNumber(header, label);
  if (!found.ok) return found;
  return found.value
    ? ok(found.value)
    : refuse('jcamp-record-missing', `##${label}= is missing: the numbers cannot be placed without it`, { label });
}

/** A number that is good to have: a value that is not one is passed over with a note. */
export function optionalNumber(header: Header, label: string): number | undefined {
  const found = headerNumber(header, label);
  if (found.ok) return found.value?.value;
  header.flags.push(tolerated('jcamp-value-unreadable', `${found.problem.message}; passed over`));
  return undefined;
}

/** Parses one text of a record as a number, noting a decimal comma. */
export function numberOf(header: Header, record: JcampRecord, text: string): Result<HeaderNumber> {
  const where = { line: record.line, label: record.writtenLabel };
  const number = parseNumber(text);
  if (number === 'not-a-number')
    return refuse('jcamp-number', `##${record.writtenLabel}= (line ${record.line}) holds "${shown(text)}", not a number`, where);
  if (number === 'comma-ambiguous')
    return refuse(
      'jcamp-comma-ambiguous',
      `##${record.writtenLabel}= (line ${record.line}) holds "${shown(text)}": a decimal comma or a thousands separator?`,
      where,
    );
  if (number.hasComma)
    header.flags.push(
      tolerated(
        'jcamp-decimal-comma',
        `##${record.writtenLabel}= "${shown(text)}" is read with a decimal comma, as ${number.value}`,
      ),
    );
  return ok(number);
}
