import { byteOf, lineEnd, nextLine, plainLabel, skipBlanks, skipByteOrderMark } from './walkRecords.js';

/**
 * Tells whether a JCAMP-DX text is wholly there: its last line, apart from blank lines and comments, is `##END=`, and as many blocks
 * were closed as opened. A bare `##END NTUPLES=` does not close a block. Nothing is decoded.
 *
 * @param bytes the file as it stands now
 */
export function isCompleteJcamp(bytes: Uint8Array): boolean {
  let openBlocks = 0;
  let endsWithEnd = false;
  for (let start = skipByteOrderMark(bytes); start < bytes.length; ) {
    const end = lineEnd(bytes, start);
    const at = skipBlanks(bytes, start, end);
    if (at < end && !(bytes[at] === byteOf.dollar && bytes[at + 1] === byteOf.dollar)) {
      const label = labelAt(bytes, at, end);
      if (label === 'TITLE') openBlocks += 1;
      if (label === 'END') openBlocks -= 1;
      endsWithEnd = label === 'END';
    }
    start = nextLine(bytes, end);
  }
  return endsWithEnd && openBlocks <= 0;
}

/** The label of a line that starts a record, when it is short enough to be TITLE or END. */
function labelAt(bytes: Uint8Array, at: number, end: number): string | undefined {
  if (bytes[at] !== byteOf.hash || bytes[at + 1] !== byteOf.hash) return undefined;
  const last = Math.min(end, at + 64);
  let stop = at + 2;
  while (stop < last && bytes[stop] !== byteOf.equals) stop += 1;
  return stop === last ? undefined : plainLabel(Buffer.from(bytes.subarray(at + 2, stop)).toString('latin1'));
}
