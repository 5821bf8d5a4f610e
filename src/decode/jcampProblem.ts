import type { Flag } from '../base/flag.js';
import { fail, type Problem, type Result } from '../base/result.js';
import { type JcampCodeName, jcampCodes } from './codes.js';

/** Where in the file: a 1-based line and the label as it stands there. */
export interface JcampPlace {
  readonly line?: number;
  readonly label?: string;
}

/**
 * Makes the failure of a file or block.
 *
 * @param code    one of `jcampCodes`
 * @param message what was found, what was expected, what it means; no final newline
 */
export function refuse(code: JcampCodeName, message: string, where: JcampPlace = {}, hint?: string): Result<never> {
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
