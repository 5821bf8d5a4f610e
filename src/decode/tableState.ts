import type { Problem } from '../base/result.js';
import type { JcampCodeName } from './codes.js';
import { refuse } from './jcampProblem.js';

/** Start of a table line that holds ordinates. */
export interface LineStart {
  readonly abscissa: number;
  /** Half a unit of the last printed digit of the abscissa. */
  readonly rounding: number;
  /** 0-based index of the first point of the line (of the repeated one when it starts with a check). */
  readonly pointIndex: number;
  readonly line: number;
}

/** A piece of the table that a plain reader must see otherwise: comments (as nothing), exponents (written out). */
export interface TableEdit {
  readonly start: number;
  readonly end: number;
  readonly text: string;
}

/** What the walk through one table carries along. */
export interface TableState {
  readonly bytes: Uint8Array;
  readonly end: number;
  readonly pointsMax: number;
  at: number;
  line: number;
  ordinates: Float64Array;
  count: number;
  /** Last ordinate, and the last difference. */
  last: number;
  difference: number;
  previous: 'none' | 'value' | 'difference' | 'check' | 'repeat';
  endsInDifference: boolean;
  lastLine: number;
  hasFraction: boolean;
  hasPseudoDigits: boolean;
  hasExponents: boolean;
  readonly lineStarts: LineStart[];
  readonly edits: TableEdit[];
  problem?: Problem;
}

/** Stops the walk with a problem at the current line. */
export function stop(state: TableState, code: JcampCodeName, message: string): void {
  const result = refuse(code, `line ${state.line}: ${message}`, { line: state.line });
  if (!result.ok) state.problem ??= result.problem;
}

/** Appends one ordinate; room grows with what is really there, never with what a header states. */
export function pushOrdinate(state: TableState, value: number): void {
  if (state.count >= state.pointsMax) {
    stop(state, 'jcamp-too-many-points', `the table holds more than ${state.pointsMax} points`);
    return;
  }
  if (state.count === state.ordinates.length) {
    const wider = new Float64Array(Math.min(state.pointsMax, Math.max(1024, state.count * 2)));
    wider.set(state.ordinates);
    state.ordinates = wider;
  }
  state.ordinates[state.count] = value;
  state.count += 1;
}
