import type { Problem } from '../base/result.js';

/** Stable codes of the record. */
export type RecordCode =
  | 'disk-full'
  | 'output-not-writable'
  | 'output-failed'
  | 'ledger-damaged'
  | 'ledger-resaved'
  | 'ledger-missing'
  | 'ledger-changed'
  | 'object-damaged'
  | 'object-missing'
  | 'record-held'
  | 'record-missing'
  | 'record-empty';

export function recordProblem(
  code: RecordCode,
  message: string,
  more: { hint?: string; file?: string; line?: number; retry?: Problem['retry']; cause?: unknown } = {},
): Problem {
  const where = {
    ...(more.file !== undefined ? { file: more.file } : {}),
    ...(more.line !== undefined ? { line: more.line } : {}),
  };
  return {
    code,
    area: 'record',
    message,
    retry: more.retry ?? 'never',
    ...(more.hint !== undefined ? { hint: more.hint } : {}),
    ...(Object.keys(where).length > 0 ? { where } : {}),
    ...(more.cause !== undefined ? { cause: more.cause } : {}),
  };
}

/** The operating system's own word for a failure, e.g. `ENOSPC`; anything else is no failure of a disk. */
export function systemCode(cause: unknown): string | undefined {
  const code = cause instanceof Error ? (cause as NodeJS.ErrnoException).code : undefined;
  return typeof code === 'string' && /^E[A-Z0-9]+$/.test(code) ? code : undefined;
}

const fullCodes = new Set(['ENOSPC', 'EDQUOT', 'EFBIG']);
const refusedCodes = new Set(['EROFS', 'EACCES', 'EPERM']);

/**
 * Turns a failure of the output disk into a problem; whether it can be tried again is decided here, next to the call.
 *
 * @returns disk-full, output-not-writable or output-failed
 * @errors  rethrows what is no failure of the operating system: a bug
 */
export function outputProblem(cause: unknown, file: string): Problem {
  const code = systemCode(cause);
  if (code === undefined) throw cause;
  if (fullCodes.has(code)) {
    const hint = 'Nothing that was acknowledged is lost. Free some space; work resumes by itself.';
    return recordProblem('disk-full', `no space to write ${file} (${code})`, { hint, file, retry: 'later', cause });
  }
  if (refusedCodes.has(code)) {
    const who = typeof process.getuid === 'function' ? ` by user id ${process.getuid()}` : '';
    const hint = 'Check the owner and the permissions of the output folder, and that its file system is writable.';
    return recordProblem('output-not-writable', `${file} cannot be written${who} (${code})`, { hint, file, cause });
  }
  const hint = 'The record was left as it was before this step. Check the disk, then start again.';
  return recordProblem('output-failed', `writing ${file} failed (${code})`, { hint, file, retry: 'later', cause });
}
