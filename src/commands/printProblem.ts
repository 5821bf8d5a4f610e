import type { Problem } from '../base/result.js';
import { escapeForTerminal } from './terminalText.js';

/** Writes an expected failure to stderr: what, where, what to do next, code. */
export function printProblem(problem: Problem): void {
  process.stderr.write(`${problemText(problem)}\n`);
}

/** The form of every error: `error: file, line 118: message`, the hint below, the code at the end. */
export function problemText(problem: Problem): string {
  const { file, line, key } = problem.where ?? {};
  const place = [file, line !== undefined ? `line ${line}` : undefined, key !== undefined ? `key ${key}` : undefined].filter(
    (part) => part !== undefined,
  );
  const head = place.length > 0 && !problem.message.startsWith(String(file)) ? `${place.join(', ')}: ` : '';
  const hint = problem.hint ? `\n  ${escapeForTerminal(problem.hint)}` : '';
  return `error: ${escapeForTerminal(head + problem.message)}${hint}   (code: ${problem.code})`;
}

/** Writes an unexpected fault: a bug in the program, never the user's doing. */
export function printFault(fault: unknown): void {
  const message = fault instanceof Error ? (fault.stack ?? fault.message) : String(fault);
  const lines = message.split('\n').map((line) => `  ${escapeForTerminal(line)}`);
  process.stderr.write(
    `error: an unexpected fault in the program; the record is as it was before this step\n${lines.join('\n')}\n  Please report these lines with the program version.\n`,
  );
}
