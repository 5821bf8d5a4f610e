import type { Flag } from '../base/flag.js';
import { fail, type Problem, type Result } from '../base/result.js';
import { type JcampCodeName, jcampCodes } from './codes.js';

/** Where in the file: a 1-based line and the label as it stands there. */
export interface JcampPlace {
  readonly line?: number;
  readonly label?: string;
}

const damagedHint = 'Copy or export the file again; if it stays so, the original is damaged.';
const hints: ReadonlyMap<string, string> = new Map([
  ['jcamp-truncated', 'Wait until the file is written to its end, or copy it again.'],
  ['jcamp-empty', 'Wait until the file is written, or copy it again.'],
  ['jcamp-not-text', 'Export the spectrum as JCAMP-DX, as plain text.'],
  ['jcamp-no-records', 'Export the spectrum as JCAMP-DX.'],
  ['jcamp-unsupported', 'Export the one-dimensional FID or spectrum as JCAMP-DX 5.01.'],
  ['jcamp-comma-ambiguous', 'Export the file with decimal points.'],
  ['jcamp-table-comma', 'Export the file with decimal points.'],
  ...[
    'block-not-closed',
    'structure',
    'check-ordinate',
    'point-count',
    'abscissa',
    'repeat-limit',
    'table-character',
    'table-syntax',
  ].map((code) => [`jcamp-${code}`, damagedHint] as const),
]);

/**
 * Makes the failure of a file or block.
 *
 * @param code    one of `jcampCodes`
 * @param message what was found, what was expected, what it means; no final newline
 */
export function refuse(code: JcampCodeName, message: string, where: JcampPlace = {}): Result<never> {
  const hint = hints.get(code);
  const problem: Problem = {
    code,
    area: 'decode',
    message,
    where: { ...where },
    retry: code === 'jcamp-truncated' || code === 'jcamp-empty' ? 'later' : 'never',
    ...(hint !== undefined ? { hint } : {}),
  };
  return fail(problem);
}

/** Makes the flag of something tolerated; its weight is that of the code list. */
export function tolerated(code: JcampCodeName, message: string): Flag {
  const kind = jcampCodes.find((entry) => entry.code === code)?.kind;
  return { code, message, weight: kind === 'flag' ? 'flag' : 'note' };
}

/** Text from a file as it may be shown: control characters as `\x1b`, long text cut. */
export function shown(text: string, lengthMax = 60): string {
  const cut = text.length > lengthMax ? `${text.slice(0, lengthMax)}...` : text;
  return cut.replace(
    /[\u0000-\u001f\u007f-\u009f\u2028\u2029]/g,
    (character) => `\\x${character.charCodeAt(0).toString(16).padStart(2, '0')}`,
  );
}
