import type { Problem } from '../base/result.js';

/** A problem of this station: never worth trying again, because the text will not change by itself. */
export function patternProblem(code: string, message: string, hint?: string): Problem {
  return { code, area: 'pattern', message, ...(hint !== undefined ? { hint } : {}), retry: 'never' };
}
