import { constants } from 'node:fs';
import { open } from 'node:fs/promises';
import { limits } from '../base/limits.js';
import { fail, ok, type Result } from '../base/result.js';
import type { Method } from '../method/method.js';
import { readMethod } from '../method/readMethod.js';
import { exitCodes } from './exitCodes.js';
import { printProblem } from './printProblem.js';

/**
 * Reads a file named on the command line: regular files only, within the size limit, never waiting on a pipe.
 *
 * @errors file-missing, file-unreadable, file-kind, file-too-large
 */
export async function readInput(path: string): Promise<Result<Uint8Array>> {
  const refuse = (code: string, message: string, hint?: string) =>
    fail({
      code,
      area: 'usage' as const,
      message: `${path}: ${message}`,
      where: { file: path },
      retry: 'never' as const,
      ...(hint ? { hint } : {}),
    });
  try {
    await using handle = await open(path, constants.O_RDONLY | constants.O_NONBLOCK);
    const status = await handle.stat();
    if (!status.isFile()) return refuse('file-kind', 'not a regular file');
    if (status.size > limits.fileSizeBytesMax)
      return refuse('file-too-large', `${status.size} bytes; at most ${limits.fileSizeBytesMax} are read`);
    return ok(new Uint8Array(await handle.readFile()));
  } catch (cause) {
    const code = (cause as NodeJS.ErrnoException).code;
    if (code === 'ENOENT' || code === 'ENOTDIR') return refuse('file-missing', 'no such file', 'Check the path.');
    return refuse(
      'file-unreadable',
      `cannot be read (${code ?? String(cause)})`,
      'Check the permissions of the file and its folder.',
    );
  }
}

/** Reads a method file for a command; every error is printed. Returns the exit code when it cannot be used. */
export async function loadMethod(path: string): Promise<Result<Method, number>> {
  const bytes = await readInput(path);
  if (!bytes.ok) {
    printProblem(bytes.problem);
    return fail(exitCodes.usage);
  }
  const method = readMethod(new TextDecoder().decode(bytes.value), path);
  if (method.ok) return method;
  for (const problem of method.problem) printProblem(problem);
  return fail(exitCodes.usage);
}
