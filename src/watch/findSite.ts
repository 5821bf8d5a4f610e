import { dirname, join } from 'node:path';
import { limits } from '../base/limits.js';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import { readSiteFile } from '../method/readSiteFile.js';
import type { SiteFile } from '../method/site.js';
import { readWhole } from '../record/durable.js';
import type { FilePort } from '../record/filePort.js';
import { systemCode } from '../record/recordProblem.js';

const siteName = 'kinetrail.yaml';

export interface FoundSite {
  readonly path: string;
  readonly file: SiteFile;
}

/**
 * Finds and reads the site file: the one named, else the nearest in the share, beside it or above it.
 *
 * @param share absolute path of the share
 * @returns `undefined` when there is none
 * @errors site-missing (only when it was named), and every fault of an invalid file
 */
export async function findSite(
  port: FilePort,
  share: string,
  named: string | undefined,
): Promise<Result<FoundSite | undefined, readonly Problem[]>> {
  if (named !== undefined) {
    const bytes = await readIfThere(port, named);
    if (bytes !== undefined) return parse(bytes, named);
    const hint = 'Check the path of --site.';
    return fail([{ code: 'site-missing', area: 'usage', message: `${named}: no readable site file`, hint, retry: 'never' }]);
  }
  for (let folder = share; ; folder = dirname(folder)) {
    const path = join(folder, siteName);
    const bytes = await readIfThere(port, path);
    if (bytes !== undefined) return parse(bytes, path);
    if (dirname(folder) === folder) return ok(undefined);
  }
}

function parse(bytes: Buffer, path: string): Result<FoundSite, readonly Problem[]> {
  const file = readSiteFile(bytes.subarray(0, limits.methodSizeBytesMax + 1).toString('utf8'), path);
  return file.ok ? ok({ path, file: file.value }) : file;
}

async function readIfThere(port: FilePort, path: string): Promise<Buffer | undefined> {
  try {
    const stat = await port.statThrough(path);
    return stat.kind === 'file' ? await readWhole(port, await port.realPath(path)) : undefined;
  } catch (cause) {
    if (systemCode(cause) === undefined) throw cause;
    return undefined;
  }
}
