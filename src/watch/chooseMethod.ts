import { dirname, resolve } from 'node:path';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import { matchGlob } from '../method/matchGlob.js';
import type { Method, RunFile } from '../method/method.js';
import { readMethod } from '../method/readMethod.js';
import { joinPath, pathText } from '../record/bytePath.js';
import type { RunListing } from './shareListing.js';
import type { WatchSession } from './watchTypes.js';

/** A method as read now: the text is what is captured. */
export interface MethodSource {
  readonly method: Method;
  readonly text: string;
  readonly file: string;
}

/**
 * Finds and reads the method of a run: `run.yaml`, else the site file, else the command line.
 *
 * @returns every fault of an invalid file; method-none when no file names one
 */
export async function chooseMethod(
  session: WatchSession,
  listing: RunListing,
  run: string,
  runFile: RunFile,
): Promise<Result<MethodSource, readonly Problem[]>> {
  const path = methodPathOf(session, listing, run, runFile);
  if (path === undefined) {
    const hint = 'Give --method, a "method:" in run.yaml, or a line under "runs:" in the site file.';
    return fail([{ code: 'method-none', area: 'watch', message: `no method is named for run ${run}`, hint, retry: 'later' }]);
  }
  const read = await session.reader.readPath(path);
  if (!read.ok) {
    const why = read.problem.code === 'file-vanished' ? 'there is no such file' : read.problem.message;
    const message = `the method of run ${run}: ${why}`;
    return fail([{ ...read.problem, code: 'method-unreadable', message, where: { file: path } }]);
  }
  const text = Buffer.from(read.value.bytes).toString('utf8');
  const method = readMethod(text, path);
  return method.ok ? ok({ method: method.value, text, file: path }) : method;
}

function methodPathOf(session: WatchSession, listing: RunListing, run: string, runFile: RunFile): string | undefined {
  const { share, site, methodPath } = session.settings;
  if (runFile.method !== undefined) return resolve(pathText(joinPath(share, ...listing.names)), runFile.method);
  const line = site?.file.runs.find(({ match }) => matchGlob(run, match));
  if (site !== undefined && line !== undefined) return resolve(dirname(site.path), line.method);
  return methodPath;
}
