import { limits } from '../base/limits.js';
import { ok, type Result } from '../base/result.js';
import { shown } from './jcampProblem.js';
import { decimalsOf, readTableNumber, startsPower } from './readTableNumber.js';
import { pushOrdinate, stop, type TableState } from './tableState.js';
import { byteOf } from './walkRecords.js';

/** Kinds of characters in a table. */
const kind = { other: 0, blank: 1, plain: 2, squeezed: 3, difference: 4, repeat: 5, missing: 6, comment: 7, comma: 8 } as const;
const kinds = new Uint8Array(256);
/** Leading digit, negative ones as -1 ... -9, that a pseudo-digit stands for. */
const leads = new Int8Array(256);

function teach(characters: string, of: number, sign: 1 | -1, firstDigit: number): void {
  [...characters].forEach((character, index) => {
    kinds[character.charCodeAt(0)] = of;
    leads[character.charCodeAt(0)] = sign * (firstDigit + index);
  });
}

teach('@ABCDEFGHI', kind.squeezed, 1, 0);
teach('abcdefghi', kind.squeezed, -1, 1);
teach('%JKLMNOPQR', kind.difference, 1, 0);
teach('jklmnopqr', kind.difference, -1, 1);
teach('STUVWXYZs', kind.repeat, 1, 1);
for (const character of '0123456789+-.') kinds[character.charCodeAt(0)] = kind.plain;
for (const [character, of] of [
  [' ', 1],
  ['\t', 1],
  ['?', 6],
  ['$', 7],
  [',', 8],
] as const)
  kinds[character.charCodeAt(0)] = of;

/**
 * Walks an `(X++(Y..Y))` table in any of the forms AFFN, PAC, SQZ, DIF and DUP, mixed as the standard allows, and checks every check
 * ordinate on the way.
 *
 * @param start     first byte after the line of the variable list
 * @param firstLine 1-based line number there
 * @param pointsStated how many points the header states: a repeat count may not lead beyond
 * @returns unscaled ordinates with the start of every line
 * @errors jcamp-table-*, jcamp-exponent-ambiguous, jcamp-missing-ordinate, jcamp-repeat-limit, jcamp-check-ordinate, jcamp-too-many-points
 * @source McDonald, Wilks, Appl. Spectrosc. 1988, 42, 151 (JCAMP-DX 4.24, section 5); checked with tables VI and VII
 */
export function walkTable(
  bytes: Uint8Array,
  place: { readonly start: number; readonly end: number; readonly firstLine: number },
  pointsStated: number,
): Result<TableState> {
  const state: TableState = {
    bytes,
    end: place.end,
    pointsMax: limits.pointCountMax,
    at: place.start,
    line: place.firstLine,
    ordinates: new Float64Array(Math.min(pointsStated + 1, 16 * (place.end - place.start) + 16)),
    count: 0,
    last: 0,
    difference: 0,
    previous: 'none',
    endsInDifference: false,
    lastLine: 0,
    hasFraction: false,
    hasPseudoDigits: false,
    hasExponents: false,
    lineStarts: [],
    edits: [],
  };
  while (state.at < state.end && !state.problem) {
    walkLine(state, pointsStated);
    if (bytes[state.at] === byteOf.return && bytes[state.at + 1] === byteOf.lineFeed) state.at += 1;
    state.at += 1;
    state.line += 1;
  }
  return state.problem ? { ok: false, problem: state.problem } : ok(state);
}

function walkLine(state: TableState, pointsStated: number): void {
  const { bytes, end } = state;
  state.previous = 'none';
  let hasAbscissa = false;
  while (state.at < end && !state.problem) {
    const byte = bytes[state.at]!;
    if (byte === byteOf.lineFeed || byte === byteOf.return) break;
    const of = kinds[byte]!;
    if (of === kind.blank) state.at += 1;
    else if (of === kind.comment && bytes[state.at + 1] === byteOf.dollar) passComment(state);
    else if (!hasAbscissa && of === kind.plain) {
      readAbscissa(state);
      hasAbscissa = true;
    } else if (!hasAbscissa) refuseCharacter(state, byte, 'where the abscissa of a line is expected');
    else readOrdinate(state, byte, of, pointsStated);
  }
  if (state.problem || !hasAbscissa) return;
  closeLine(state);
}

/** A repeat counts as what it repeats: after an actual value there is no difference (NaN) to check. */
function closeLine(state: TableState): void {
  const { previous, difference } = state;
  if (previous === 'none') stop(state, 'jcamp-table-syntax', 'an abscissa without ordinates');
  state.endsInDifference = previous === 'difference' || (previous === 'repeat' && !Number.isNaN(difference));
  state.lastLine = state.line;
}

function passComment(state: TableState): void {
  const start = state.at;
  while (state.at < state.end && state.bytes[state.at] !== byteOf.lineFeed && state.bytes[state.at] !== byteOf.return)
    state.at += 1;
  state.edits.push({ start, end: state.at, text: '' });
}

function readAbscissa(state: TableState): void {
  const sign = readSign(state);
  const abscissa = sign * readTableNumber(state, -1, true);
  const isCheck = state.endsInDifference && state.count > 0;
  state.lineStarts.push({
    abscissa,
    rounding: 0.5 * 10 ** -decimalsOf.last,
    pointIndex: isCheck ? state.count - 1 : state.count,
    line: state.line,
  });
}

function readSign(state: TableState): 1 | -1 {
  const byte = state.bytes[state.at];
  if (byte === 43 || byte === 45) state.at += 1;
  return byte === 45 ? -1 : 1;
}

function readOrdinate(state: TableState, byte: number, of: number, pointsStated: number): void {
  if (of === kind.plain) {
    const sign = readSign(state);
    takeValue(state, sign * readTableNumber(state, -1, true));
  } else if (of === kind.squeezed || of === kind.difference) {
    markPseudoDigit(state);
    if (startsPower(state))
      stop(state, 'jcamp-exponent-ambiguous', 'E with a sign after a pseudo-digit: a power of ten, or the digit 5?');
    const lead = leads[byte]!;
    state.at += 1;
    const magnitude = readTableNumber(state, lead < 0 ? -lead : lead, false);
    const value = lead < 0 ? -magnitude : magnitude;
    if (of === kind.squeezed) takeValue(state, value);
    else takeDifference(state, value);
  } else if (of === kind.repeat) {
    markPseudoDigit(state);
    state.at += 1;
    takeRepeat(state, readTableNumber(state, leads[byte]!, false), pointsStated);
  } else if (of === kind.missing) {
    stop(
      state,
      'jcamp-missing-ordinate',
      `point ${state.count + 1} is marked ?: missing or off scale, so the spectrum has a hole`,
    );
  } else if (of === kind.comma) {
    stop(state, 'jcamp-table-comma', 'a comma in the table: decimal or separating, it cannot be told');
  } else refuseCharacter(state, byte, 'in the table');
}

function markPseudoDigit(state: TableState): void {
  if (state.hasExponents) stop(state, 'jcamp-exponent-ambiguous', 'pseudo-digits in a table that holds powers of ten');
  state.hasPseudoDigits = true;
}

function takeValue(state: TableState, value: number): void {
  if (state.previous === 'none' && state.endsInDifference) {
    const slack = state.hasFraction ? 1e-9 * Math.max(Math.abs(value), Math.abs(state.last), 1e-300) : 0;
    if (!(Math.abs(value - state.last) <= slack))
      stop(
        state,
        'jcamp-check-ordinate',
        `the check ordinate is ${value}, but the differences of line ${state.lastLine} lead to ${state.last}: one of these lines is damaged or a line is missing`,
      );
    state.previous = 'check';
  } else {
    pushOrdinate(state, value);
    state.previous = 'value';
  }
  state.last = value;
  state.difference = Number.NaN;
}

function takeDifference(state: TableState, value: number): void {
  if (state.previous === 'none') {
    stop(state, 'jcamp-table-syntax', 'the first ordinate of a line is a difference, not an actual value');
    return;
  }
  state.difference = value;
  state.last += value;
  pushOrdinate(state, state.last);
  state.previous = 'difference';
}

function takeRepeat(state: TableState, count: number, pointsStated: number): void {
  if (state.previous !== 'value' && state.previous !== 'difference') {
    stop(state, 'jcamp-table-syntax', `a repeat count without an ordinate to repeat`);
    return;
  }
  if (!Number.isInteger(count) || state.count + count - 1 > pointsStated) {
    stop(
      state,
      'jcamp-repeat-limit',
      `a repeat count of ${count} after ${state.count} points leads beyond the ${pointsStated} points stated`,
    );
    return;
  }
  const step = state.previous === 'difference' ? state.difference : 0;
  for (let k = 1; k < count; k += 1) {
    state.last += step;
    pushOrdinate(state, state.last);
  }
  state.previous = 'repeat';
}

function refuseCharacter(state: TableState, byte: number, where: string): void {
  stop(state, 'jcamp-table-character', `the character "${shown(String.fromCharCode(byte))}" ${where}`);
}
