/** Forms of a table of ordinates (JCAMP-DX 4.24, section 5). */
export type TableForm = 'AFFN' | 'PAC' | 'SQZ' | 'DIF' | 'DIFDUP';

const lineLengthMax = 78;
const squeezedPositive = '@ABCDEFGHI';
const squeezedNegative = '@abcdefghi';
const differencePositive = '%JKLMNOPQR';
const differenceNegative = '%jklmnopqr';
const duplicate = ' STUVWXYZs';

/**
 * Encodes whole ordinates as the lines of an `(X++(Y..Y))` table, with the checkpoints that the form asks for.
 *
 * @param integers   shape (n), whole numbers
 * @param firstCount abscissa of the first point in units of the x factor
 * @param stepCount  +1 or -1: how the abscissa counts
 * @returns lines of at most 78 characters
 * @source McDonald, Wilks, Appl. Spectrosc. 1988, 42, 151 (tables VI and VII)
 */
export function encodeTable(integers: ArrayLike<number>, firstCount: number, stepCount: 1 | -1, form: TableForm): string[] {
  const countText = (index: number) => affnNumber(roundCount(firstCount + stepCount * index));
  return form === 'DIF' || form === 'DIFDUP'
    ? encodeDifferences(integers, countText, form === 'DIFDUP')
    : encodeValues(integers, countText, form);
}

/** A number as AFFN: shortest digits that read back, exponents as `E-07`. */
export function affnNumber(value: number): string {
  return String(value + 0).replace(/e([+-])(\d+)$/, (_, sign: string, digits: string) => `E${sign}${digits.padStart(2, '0')}`);
}

/** Abscissae are printed to a ten-thousandth of a step, as far as doubles carry. */
function roundCount(count: number): number {
  return Math.abs(count) < 1e10 ? Math.round(count * 1e4) / 1e4 : count;
}

function encodeValues(integers: ArrayLike<number>, countText: (index: number) => string, form: TableForm): string[] {
  const lines: string[] = [];
  let line = countText(0);
  for (let k = 0; k < integers.length; k += 1) {
    const piece = valueText(integers[k]!, form);
    if (k > 0 && line.length + piece.length > lineLengthMax) {
      lines.push(line);
      line = countText(k);
    }
    line += piece;
  }
  return [...lines, line];
}

function valueText(value: number, form: TableForm): string {
  if (form === 'SQZ') return pseudoDigits(value, squeezedPositive, squeezedNegative);
  const digits = affnNumber(value);
  if (form === 'PAC') return value < 0 ? digits : `+${digits}`;
  return ` ${digits}`;
}

function pseudoDigits(value: number, positive: string, negative: string): string {
  const digits = String(Math.abs(value));
  return (value < 0 ? negative : positive)[Number(digits[0])]! + digits.slice(1);
}

/** A line ends in a difference, so each next line repeats the last ordinate: as a check, without counting on. */
function encodeDifferences(integers: ArrayLike<number>, countText: (index: number) => string, hasDuplicates: boolean): string[] {
  const lines: string[] = [];
  const startLine = (index: number) => countText(index) + pseudoDigits(integers[index]!, squeezedPositive, squeezedNegative);
  let line = startLine(0);
  let k = 1;
  while (k < integers.length) {
    const step = integers[k]! - integers[k - 1]!;
    let run = 1;
    if (hasDuplicates) while (k + run < integers.length && integers[k + run]! - integers[k + run - 1]! === step) run += 1;
    const piece = pseudoDigits(step, differencePositive, differenceNegative) + (run > 1 ? duplicateText(run) : '');
    if (line.length + piece.length > lineLengthMax) {
      lines.push(line);
      line = startLine(k - 1);
    }
    line += piece;
    k += run;
  }
  lines.push(line);
  if (integers.length > 1) lines.push(`${startLine(integers.length - 1)}  $$ checkpoint`);
  return lines;
}

function duplicateText(run: number): string {
  const digits = String(run);
  return duplicate[Number(digits[0])]! + digits.slice(1);
}
