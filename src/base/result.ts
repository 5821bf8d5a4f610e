/**
 * Expected failures are values, bugs are throws. A `Problem` carries a stable code for programs and a
 * sentence for people; `Result` is what every fallible function returns.
 */
export type Result<T, P = Problem> = { readonly ok: true; readonly value: T } | { readonly ok: false; readonly problem: P };

/** Where a problem was found. Lines are 1-based. */
export interface Place {
  readonly file?: string;
  readonly line?: number;
  readonly label?: string;
  readonly key?: string;
}

export interface Problem {
  /** Stable, lower-case words joined by dashes, e.g. `jcamp-repeat-limit`. */
  readonly code: string;
  readonly area:
    | 'decode'
    | 'spectrum'
    | 'pattern'
    | 'signal'
    | 'amount'
    | 'method'
    | 'series'
    | 'record'
    | 'watch'
    | 'report'
    | 'tell'
    | 'usage';
  /** What happened, with what was found and what was expected. One sentence, no final newline. */
  readonly message: string;
  /** What to do next. */
  readonly hint?: string;
  readonly where?: Place;
  readonly cause?: unknown;
  readonly retry: 'never' | 'later' | 'now';
}

export function ok<T>(value: T): Result<T, never> {
  return { ok: true, value };
}

export function fail<P = Problem>(problem: P): Result<never, P> {
  return { ok: false, problem };
}

/** A broken promise inside the program: the one thing that is thrown. */
export class InvariantError extends Error {
  override readonly name = 'InvariantError';
}

export function invariant(condition: unknown, message: string): asserts condition {
  if (!condition) throw new InvariantError(message);
}

export function assertNever(value: never): never {
  throw new InvariantError(`unexpected case: ${JSON.stringify(value)}`);
}
