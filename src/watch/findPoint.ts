import { fail, ok, type Problem, type Result } from '../base/result.js';
import type { RunState } from '../record/runState.js';

export interface FoundPoint {
  readonly point: string;
  readonly file: string;
  readonly block?: number;
}

const prefixLengthMin = 6;

/**
 * Finds the time point that a person names: by file name, or by the beginning of its hash; `#2` names a block.
 *
 * @errors point-unknown, point-ambiguous
 */
export function findPoint(state: RunState, given: string): Result<FoundPoint> {
  const match = /^(.*?)(?:#(\d{1,4}))?$/s.exec(given);
  const name = match?.[1] ?? given;
  const block = match?.[2] !== undefined ? { block: Number(match[2]) } : {};
  const files = [...state.files.values()];
  const named = files.find(({ file, kept }) => file === name && kept.sha256 !== undefined);
  if (named !== undefined) return ok({ point: named.kept.sha256!, file: named.file, ...block });
  const contents = files.flatMap(({ file, kept, others }) => [kept, ...others].map(({ sha256 }) => ({ file, point: sha256 })));
  const isPrefix = name.length >= prefixLengthMin && /^[0-9a-f]+$/i.test(name);
  const found = isPrefix ? contents.filter(({ point }) => point?.startsWith(name.toLowerCase())) : [];
  const points = new Set(found.map(({ point }) => point));
  if (points.size > 1)
    return fail(problem('point-ambiguous', `"${given}" fits ${points.size} files`, 'Give more characters of the hash.'));
  const only = found[0];
  if (only?.point !== undefined) return ok({ point: only.point, file: only.file, ...block });
  const some = files.slice(0, 5).map(({ file }) => file);
  return fail(
    problem(
      'point-unknown',
      `no time point of this record is called "${given}"`,
      `Give a file name (such as ${some.join(', ')}) or the first characters of a file's SHA-256.`,
    ),
  );
}

function problem(code: string, message: string, hint: string): Problem {
  return { code, area: 'usage', message, hint, retry: 'never' };
}
