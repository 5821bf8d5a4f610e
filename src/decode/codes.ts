/** One stable code of `decode`, with its meaning in one line. Documentation is generated from this list. */
export interface JcampCode {
  readonly code: string;
  /** `refusal`: no numbers are returned. `note` and `flag`: tolerated, and said in the acquisition's flags. */
  readonly kind: 'refusal' | 'flag' | 'note';
  readonly meaning: string;
}

/** Every code that `decodeJcamp` can give, in the order in which a file is read. */
export const jcampCodes = [
  // The file as a whole.
  { code: 'jcamp-empty', kind: 'refusal', meaning: 'the file holds nothing' },
  { code: 'jcamp-file-too-large', kind: 'refusal', meaning: 'the file is larger than the limit and was not read' },
  { code: 'jcamp-not-text', kind: 'refusal', meaning: 'the file holds zero bytes: binary data or two-byte text' },
  { code: 'jcamp-no-records', kind: 'refusal', meaning: 'no line starts with ##: not a JCAMP-DX file' },
  { code: 'jcamp-line-too-long', kind: 'refusal', meaning: 'a line is longer than the limit' },
  { code: 'jcamp-too-many-labels', kind: 'refusal', meaning: 'the file holds more records than the limit' },
  { code: 'jcamp-record-malformed', kind: 'refusal', meaning: 'a line starts with ## but holds no label and equals sign' },
  { code: 'jcamp-title-first', kind: 'refusal', meaning: 'the first record is not ##TITLE=, so the start is missing' },
  { code: 'jcamp-too-many-blocks', kind: 'refusal', meaning: 'the compound file holds more blocks than the limit' },
  { code: 'jcamp-link-depth', kind: 'refusal', meaning: 'LINK blocks are nested deeper than the limit' },
  { code: 'jcamp-truncated', kind: 'refusal', meaning: 'the text ends before ##END=: half written or cut off' },
  { code: 'jcamp-unsupported', kind: 'refusal', meaning: 'readable, but not a one-dimensional NMR FID or spectrum' },
  // One block: structure and header.
  { code: 'jcamp-block-not-closed', kind: 'refusal', meaning: 'the next block starts before ##END= of this one' },
  { code: 'jcamp-structure', kind: 'refusal', meaning: 'a LINK block holds data of its own: a ##TITLE= line was lost' },
  { code: 'jcamp-record-missing', kind: 'refusal', meaning: 'a record that is needed to place the numbers is missing' },
  { code: 'jcamp-record-twice', kind: 'refusal', meaning: 'a record occurs twice with different contents' },
  { code: 'jcamp-number', kind: 'refusal', meaning: 'a header value is not a finite number of the kind needed' },
  { code: 'jcamp-comma-ambiguous', kind: 'refusal', meaning: 'a comma in a header number can be read in two ways' },
  { code: 'jcamp-list-length', kind: 'refusal', meaning: 'a list has another number of entries than ##SYMBOL=' },
  { code: 'jcamp-units', kind: 'refusal', meaning: 'the unit of the abscissa is missing or not one of HZ, PPM, SECONDS' },
  { code: 'jcamp-pages', kind: 'refusal', meaning: 'pages or tables are missing, repeated or not named' },
  { code: 'jcamp-table-form', kind: 'refusal', meaning: 'the table is not of the form (X++(Y..Y))' },
  { code: 'jcamp-too-many-points', kind: 'refusal', meaning: 'more points than the limit' },
  { code: 'jcamp-too-few-points', kind: 'refusal', meaning: 'fewer than two points' },
  // One block: the tables.
  { code: 'jcamp-table-character', kind: 'refusal', meaning: 'a character that no number form allows' },
  { code: 'jcamp-table-comma', kind: 'refusal', meaning: 'a comma in a table: decimal or separating, it cannot be told' },
  { code: 'jcamp-table-syntax', kind: 'refusal', meaning: 'a line of a table does not follow its form' },
  { code: 'jcamp-exponent-ambiguous', kind: 'refusal', meaning: 'E with a sign in a table that also uses E as a digit' },
  { code: 'jcamp-missing-ordinate', kind: 'refusal', meaning: 'a point is marked ? (missing or off scale)' },
  { code: 'jcamp-repeat-limit', kind: 'refusal', meaning: 'a repeat count leads beyond the number of points' },
  { code: 'jcamp-check-ordinate', kind: 'refusal', meaning: 'a check ordinate differs from the sum of differences' },
  { code: 'jcamp-point-count', kind: 'refusal', meaning: 'the table holds another number of points than stated' },
  { code: 'jcamp-abscissa', kind: 'refusal', meaning: 'a line does not start at the abscissa of its first point' },
  { code: 'jcamp-axis', kind: 'refusal', meaning: 'FIRST, LAST, DELTA and FACTOR of the abscissa contradict each other' },
  { code: 'jcamp-first-ordinate', kind: 'refusal', meaning: 'the first point differs from FIRSTY or FIRST' },
  { code: 'jcamp-last-ordinate', kind: 'refusal', meaning: 'the last point differs from LASTY or LAST' },
  { code: 'jcamp-extreme-ordinate', kind: 'refusal', meaning: 'the extremes differ from MIN or MAX' },
  { code: 'jcamp-not-finite', kind: 'refusal', meaning: 'a point is too large to be a number' },
  { code: 'jcamp-decoders-disagree', kind: 'refusal', meaning: 'two independent decoders read different numbers' },
  // Tolerated, and said.
  { code: 'jcamp-text-before-title', kind: 'note', meaning: 'text before the first record was passed over' },
  { code: 'jcamp-text-after-end', kind: 'note', meaning: 'text after the last ##END= was passed over' },
  { code: 'jcamp-end-ntuples-missing', kind: 'note', meaning: '##END NTUPLES= is missing; all pages are complete' },
  { code: 'jcamp-block-count', kind: 'flag', meaning: '##BLOCKS= states another number of blocks than were found' },
  { code: 'jcamp-block-passed-over', kind: 'note', meaning: 'blocks without a spectrum (peaks, structures) were passed over' },
  { code: 'jcamp-decimal-comma', kind: 'note', meaning: 'a decimal comma in the header was read as a decimal point' },
  { code: 'jcamp-point-count-header', kind: 'note', meaning: 'NPOINTS is off by one; abscissae, DELTAX and table agree' },
  { code: 'jcamp-last-abscissa', kind: 'note', meaning: 'LASTX lies one step beyond the last point' },
  {
    code: 'jcamp-step-rounded',
    kind: 'note',
    meaning: 'the factor of the abscissa is rounded more coarsely than FIRST and LAST',
  },
  {
    code: 'jcamp-first-abscissa',
    kind: 'note',
    meaning: 'the first line of the table starts beside FIRST, by less than half a step',
  },
  { code: 'jcamp-abscissa-counts', kind: 'note', meaning: 'abscissae of the table only count the points' },
  { code: 'jcamp-abscissa-coarse', kind: 'note', meaning: 'abscissae are printed too coarsely to show a lost line' },
  { code: 'jcamp-delta-sign', kind: 'note', meaning: 'DELTAX has the wrong sign; FIRSTX and LASTX are used' },
  { code: 'jcamp-final-check-missing', kind: 'note', meaning: 'the last check ordinate of the table is missing' },
  {
    code: 'jcamp-ordinate-header',
    kind: 'note',
    meaning: 'a first, last, smallest or largest ordinate in the header is slightly off',
  },
  {
    code: 'jcamp-extremes-header',
    kind: 'note',
    meaning: 'MIN and MAX are empty, those of another page, or not the ends of the axis',
  },
  { code: 'jcamp-time-zone-missing', kind: 'note', meaning: 'the time of acquisition has no zone and is taken as UTC' },
  { code: 'jcamp-date-unreadable', kind: 'flag', meaning: 'a date is not understood or day and month cannot be told apart' },
  { code: 'jcamp-value-unreadable', kind: 'note', meaning: 'an optional header value is not understood and was passed over' },
  { code: 'jcamp-field', kind: 'flag', meaning: '.OBSERVE FREQUENCY and .FIELD do not belong together for the nucleus' },
  { code: 'jcamp-acquisition-time', kind: 'note', meaning: '.ACQUISITION TIME is not points times dwell time' },
] as const satisfies readonly JcampCode[];

export type JcampCodeName = (typeof jcampCodes)[number]['code'];
