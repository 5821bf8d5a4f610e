import { limits } from '../base/limits.js';
import type { Problem } from '../base/result.js';
import { readMethod } from '../method/readMethod.js';
import { readWhole } from '../record/durable.js';
import type { RecordContext } from '../record/recordContext.js';
import { systemCode } from '../record/recordProblem.js';
import type { DoctorQuestion, Finding } from './examine.js';
import { findSite } from './findSite.js';

/** Reads the method and the site file and says where each value would come from. */
export async function examineSettings(context: RecordContext, { share, method, site }: DoctorQuestion): Promise<Finding[]> {
  const findings: Finding[] = method !== undefined ? await examineMethod(context, method) : [];
  if (share === undefined && site === undefined) return findings;
  const found = await findSite(context.port, share ?? '/', site);
  if (!found.ok) return [...findings, ...found.problem.map((problem) => failed('site file', problem))];
  if (found.value === undefined) {
    const message = 'none in, beside or above the share: settle time, poll time and workers are the defaults (30 s, 20 s, 2)';
    return [...findings, { name: 'site file', state: 'pass', message }];
  }
  const { path, file } = found.value;
  const from = (name: string, value: number | undefined, fallback: number) =>
    `${name} ${value ?? fallback} (${value !== undefined ? 'site file' : 'default'})`;
  const message = `${path}: ${from('settle_s', file.settleS, 30)}, ${from('poll_s', file.pollS, 20)}, ${from('workers', file.workers, 2)}, ${file.runs.length} rules for methods, ${file.tell.length} for messages`;
  return [...findings, { name: 'site file', state: 'pass', message }];
}

async function examineMethod({ port }: RecordContext, path: string): Promise<Finding[]> {
  const fix = 'Check the path and the permissions.';
  try {
    const bytes = await readWhole(port, path);
    if (bytes === undefined) return [{ name: 'method', state: 'fail', message: `${path}: no such file`, fix }];
    const method = readMethod(bytes.subarray(0, limits.methodSizeBytesMax + 1).toString('utf8'), path);
    if (!method.ok) return method.problem.map((problem) => failed('method', problem));
    const { title, version, sha256 } = method.value;
    return [{ name: 'method', state: 'pass', message: `${title}, version ${version} (${sha256.slice(0, 12)})` }];
  } catch (cause) {
    if (systemCode(cause) === undefined) throw cause;
    return [{ name: 'method', state: 'fail', message: `${path} cannot be read (${systemCode(cause)})`, fix }];
  }
}

function failed(name: string, { message, hint, where }: Problem): Finding {
  const place = where?.line !== undefined ? `${where.file}, line ${where.line}: ` : '';
  return { name, state: 'fail', message: `${place}${message}`, fix: hint ?? 'Correct this line.' };
}
