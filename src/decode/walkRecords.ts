import { limits } from '../base/limits.js';
import { ok, type Problem, type Result } from '../base/result.js';
import { refuse, shown } from './jcampProblem.js';

/** One labelled data record, as places in the bytes of the file. */
export interface JcampRecord {
  /** Upper case, without blanks, dashes, slashes and underscores. */
  readonly label: string;
  /** The label as it stands in the file. */
  readonly writtenLabel: string;
  /** 1-based line of the label. */
  readonly line: number;
  /** First byte after the equals sign, and the byte after the last of the record. */
  readonly start: number;
  readonly end: number;
  /** Set when marks stand without a label: damage that concerns the block around it only. */
  readonly problem?: Problem;
}

const labelLengthMax = 256;
export const byteOf = { lineFeed: 10, return: 13, blank: 32, tab: 9, hash: 35, dollar: 36, equals: 61 } as const;

/**
 * Splits the bytes of a JCAMP-DX file into its records, in one pass and without decoding any value.
 *
 * @param bytes any line ending (LF, CR LF, CR), with or without byte order mark, blanks before `##` allowed
 * @returns records in file order, and where the text before the first one ends
 * @errors jcamp-no-records, jcamp-line-too-long, jcamp-too-many-labels; jcamp-record-malformed with the record it concerns
 * @source JCAMP-DX 4.24, section 3 (labelled data records)
 */
export function walkRecords(bytes: Uint8Array): Result<readonly JcampRecord[]> {
  const records: JcampRecord[] = [];
  const text = Buffer.from(bytes.buffer, bytes.byteOffset, bytes.length);
  const labels: Labels = new Map();
  let open: Omit<JcampRecord, 'end'> | undefined;
  let line = 0;
  for (let start = skipByteOrderMark(bytes); start < bytes.length; ) {
    line += 1;
    const end = lineEnd(bytes, start);
    if (end - start > limits.lineLengthMax)
      return refuse('jcamp-line-too-long', `line ${line} is longer than ${limits.lineLengthMax} characters`, { line });
    const mark = skipBlanks(bytes, start, end);
    if (bytes[mark] === byteOf.hash && bytes[mark + 1] === byteOf.hash && mark + 1 < end) {
      if (open) records.push({ ...open, end: start });
      open = openRecord(text, labels, mark + 2, end, line);
      if (records.length >= limits.labelCountMax)
        return refuse('jcamp-too-many-labels', `more than ${limits.labelCountMax} records`, { line });
    }
    start = nextLine(bytes, end);
  }
  if (!open) return refuse('jcamp-no-records', 'no line starts with ##: this is not a JCAMP-DX file');
  records.push({ ...open, end: bytes.length });
  return ok(records);
}

/** First byte of the text: after a UTF-8 byte order mark, if there is one. */
export function skipByteOrderMark(bytes: Uint8Array): number {
  return bytes[0] === 0xef && bytes[1] === 0xbb && bytes[2] === 0xbf ? 3 : 0;
}

/** The byte after the last character of the line that holds `at`. */
export function lineEnd(bytes: Uint8Array, at: number): number {
  let end = at;
  while (end < bytes.length && bytes[end] !== byteOf.lineFeed && bytes[end] !== byteOf.return) end += 1;
  return end;
}

/** First byte of the line after one that ends at `end`. */
export function nextLine(bytes: Uint8Array, end: number): number {
  return bytes[end] === byteOf.return && bytes[end + 1] === byteOf.lineFeed ? end + 2 : end + 1;
}

export function skipBlanks(bytes: Uint8Array, from: number, end: number): number {
  let at = from;
  while (at < end && (bytes[at] === byteOf.blank || bytes[at] === byteOf.tab)) at += 1;
  return at;
}

/** Labels met before, by their spelling: a file of many records has few different ones. */
type Labels = Map<string, Pick<JcampRecord, 'label' | 'writtenLabel'>>;

function openRecord(bytes: Buffer, labels: Labels, start: number, end: number, line: number): Omit<JcampRecord, 'end'> {
  const last = Math.min(end, start + labelLengthMax);
  let at = start;
  while (at < last && bytes[at] !== byteOf.equals) at += 1;
  const spelling = bytes.toString('latin1', start, at);
  const label = labels.get(spelling) ?? { label: plainLabel(spelling), writtenLabel: shown(spelling.trim()) };
  labels.set(spelling, label);
  const record = { ...label, line, start: at + 1 };
  if (at < last) return record;
  const text = `line ${line} starts with ## but no label and equals sign follow: "##${record.writtenLabel}"`;
  const isCutOff = end === bytes.length;
  const malformed = isCutOff
    ? refuse('jcamp-truncated', `the text ends within a label at line ${line}: half written or cut off`, { line })
    : refuse('jcamp-record-malformed', text, { line });
  return malformed.ok ? record : { ...record, label: '', start: end, problem: malformed.problem };
}

/** Labels compare without blanks, dashes, slashes, underscores and case. */
export function plainLabel(text: string): string {
  return text.replace(/[\s\-/_]/g, '').toUpperCase();
}
