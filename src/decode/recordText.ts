import { byteOf, type JcampRecord } from './walkRecords.js';

const textLengthMax = 16 * 1024;
const utf8 = new TextDecoder('utf-8', { fatal: true });

/**
 * The value of a header record as text: comments removed, lines kept, blanks at both ends removed.
 *
 * @returns at most the first 16 KiB; UTF-8 when the bytes are, else Latin-1
 */
export function recordText(bytes: Uint8Array, record: Pick<JcampRecord, 'start' | 'end'>): string {
  const part = bytes.subarray(record.start, Math.min(record.end, record.start + textLengthMax));
  const text = decodeBytes(part);
  const lines = text.split(/\r\n|\n|\r/);
  return lines
    .map((line) => withoutComment(line).trim())
    .join('\n')
    .trim();
}

/** First line of a record and where the next one starts: the variable list of a table, then its lines. */
export function firstLineOf(bytes: Uint8Array, record: JcampRecord): { text: string; next: number } {
  let end = record.start;
  while (end < record.end && bytes[end] !== byteOf.lineFeed && bytes[end] !== byteOf.return) end += 1;
  const next = bytes[end] === byteOf.return && bytes[end + 1] === byteOf.lineFeed ? end + 2 : end + 1;
  return { text: recordText(bytes, { start: record.start, end }), next: Math.min(next, record.end) };
}

function withoutComment(line: string): string {
  const at = line.indexOf('$$');
  return at < 0 ? line : line.slice(0, at);
}

function decodeBytes(part: Uint8Array): string {
  if (part.every((byte) => byte < 0x80)) return Buffer.from(part.buffer, part.byteOffset, part.length).toString('latin1');
  try {
    return utf8.decode(part);
  } catch {
    return Buffer.from(part.buffer, part.byteOffset, part.length).toString('latin1');
  }
}
