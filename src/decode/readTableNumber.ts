import { stop, type TableState } from './tableState.js';

const exactMax = 2 ** 53;
const powers = Array.from({ length: 23 }, (_, k) => 10 ** k);
const digitZero = 48;
const digitNine = 57;
const point = 46;
const upperE = 69;
const lowerE = 101;

/**
 * Reads an unsigned number at the current place: digits, point, digits, and an exponent where one is allowed.
 *
 * Up to 2^53 as a whole and 22 decimals the quotient of two exact doubles is correctly rounded; anything longer goes through the
 * general conversion.
 *
 * @param lead         leading digit that a pseudo-digit stood for; -1 when the number starts here
 * @param mayHavePower plain numbers only: after a pseudo-digit an E is the next ordinate
 * @returns the magnitude; the number of decimals is left in `decimalsOf`
 * @source Clinger, PLDI 1990 (exact conversion of short decimals)
 */
export function readTableNumber(state: TableState, lead: number, mayHavePower: boolean): number {
  const { bytes, end } = state;
  const start = state.at;
  let mantissa = Math.max(lead, 0);
  let digits = lead < 0 ? 0 : 1;
  let at = start;
  let byte = at < end ? bytes[at]! : 0;
  while (byte >= digitZero && byte <= digitNine) {
    mantissa = mantissa * 10 + byte - digitZero;
    digits += 1;
    at += 1;
    byte = at < end ? bytes[at]! : 0;
  }
  let decimals = 0;
  if (byte === point) {
    state.hasFraction = true;
    at += 1;
    byte = at < end ? bytes[at]! : 0;
    while (byte >= digitZero && byte <= digitNine) {
      mantissa = mantissa * 10 + byte - digitZero;
      digits += 1;
      decimals += 1;
      at += 1;
      byte = at < end ? bytes[at]! : 0;
    }
  }
  state.at = at;
  decimalsOf.last = decimals;
  if (digits === 0) stop(state, 'jcamp-table-syntax', 'a sign or point without digits');
  if (mayHavePower && startsPower(state)) return readPower(state, start);
  if (mantissa < exactMax && decimals <= 22) return decimals === 0 ? mantissa : mantissa / powers[decimals]!;
  return Number((lead < 0 ? '' : String(lead)) + textOf(state, start, at));
}

/** Decimals of the number read last (a scratch value; the walk is not re-entrant). */
export const decimalsOf = { last: 0 };

/** Whether `E`, a sign and a digit stand at the current place. */
export function startsPower({ bytes, at, end }: TableState): boolean {
  const byte = bytes[at];
  if (byte !== upperE && byte !== lowerE) return false;
  const sign = bytes[at + 1];
  const digit = bytes[at + 2] ?? 0;
  return at + 2 < end && (sign === 43 || sign === 45) && digit >= digitZero && digit <= digitNine;
}

/** `E` with a sign is a power of ten in AFFN, and could be an ordinate in a table of pseudo-digits: never both in one table. */
function readPower(state: TableState, start: number): number {
  const mantissa = textOf(state, start, state.at);
  let at = state.at + 2;
  while (at < state.end && at < state.at + 6 && state.bytes[at]! >= digitZero && state.bytes[at]! <= digitNine) at += 1;
  const power = textOf(state, state.at + 1, at);
  state.at = at;
  state.hasExponents = true;
  state.hasFraction = true;
  if (state.hasPseudoDigits) stop(state, 'jcamp-exponent-ambiguous', `E${power}: a power of ten, or the digit 5?`);
  if (power.length > 4) stop(state, 'jcamp-table-syntax', `the power of ten E${power} has too many digits`);
  const value = Number(`${mantissa}e${power}`);
  if (!Number.isFinite(value)) stop(state, 'jcamp-not-finite', `${mantissa}E${power} is too large`);
  decimalsOf.last -= Number(power);
  state.edits.push({ start, end: at, text: plainText(mantissa, Number(power)) });
  return value;
}

/** Shifts the point of a decimal text, so that a reader without powers of ten sees the same number. */
function plainText(mantissa: string, power: number): string {
  const [whole = '', fraction = ''] = mantissa.split('.');
  const digits = whole + fraction;
  const place = whole.length + power;
  if (place <= 0) return `0.${'0'.repeat(-place)}${digits}`;
  return place >= digits.length ? digits.padEnd(place, '0') : `${digits.slice(0, place)}.${digits.slice(place)}`;
}

function textOf({ bytes }: TableState, start: number, end: number): string {
  return Buffer.from(bytes.buffer, bytes.byteOffset + start, end - start).toString('latin1');
}
