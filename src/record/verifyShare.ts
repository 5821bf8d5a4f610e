import { sha256 } from '../base/sha256.js';
import { joinPath, nameText, pathText } from './bytePath.js';
import { readWhole } from './durable.js';
import type { FilePort, Path } from './filePort.js';
import { systemCode } from './recordProblem.js';
import type { RunState } from './runState.js';
import type { Check } from './verifyTypes.js';

/**
 * Compares the files of the share with what was captured from it.
 *
 * @param share the share (then the run's name leads to its folder) or the run's folder itself
 */
export async function verifyShare(port: FilePort, share: string, state: RunState): Promise<Check[]> {
  const folder = await runFolderOnShare(port, share, state.run);
  if (folder === undefined) return [{ name: 'share', state: 'fail', message: `${share} cannot be listed` }];
  const names = (await port.readFolder(folder)).map(({ name }) => name);
  const present = new Map(names.map((name) => [name.toString('latin1'), name]));
  const checks: Check[] = [];
  let same = 0;
  const missing: string[] = [];
  for (const { key, kept, others } of state.files.values()) {
    if (kept.sha256 === undefined || kept.methodSha256 === undefined) continue;
    const name = present.get(key);
    const hash = name !== undefined ? await hashOf(port, joinPath(folder, name)) : undefined;
    if (hash === undefined) missing.push(kept.file);
    else if (hash === kept.sha256) same += 1;
    else
      checks.push(
        differs(
          kept.file,
          kept.seq,
          others.some(({ sha256: other }) => other === hash),
        ),
      );
  }
  if (missing.length > 0) {
    checks.push({
      name: 'share',
      state: 'note',
      message: `${missing.length} captured files are no longer on the share`,
      file: missing.sort()[0]!,
    });
  }
  const unseen = [...present].filter(
    ([key, name]) => /\.(jdx|dx|jcamp)$/i.test(key) && !state.files.has(key) && !/^[.~]/.test(key) && name.length > 0,
  );
  if (unseen.length > 0) {
    checks.push({
      name: 'share',
      state: 'note',
      message: `${unseen.length} files of the share are not in the record yet`,
      file: nameText(unseen[0]![1]),
    });
  }
  if (checks.some(({ state: outcome }) => outcome === 'fail')) return checks;
  return [{ name: 'share', state: 'pass', message: `${same} files of ${pathText(folder)} are the captured ones` }, ...checks];
}

function differs(file: string, seq: number, isKnown: boolean): Check {
  const more = isKnown ? ' (its present content is captured as well and waits for a decision)' : '';
  return {
    name: 'share',
    state: 'fail',
    message: `entry ${seq}: ${file} on the share is not what was captured${more}`,
    seq,
    file,
  };
}

async function runFolderOnShare(port: FilePort, share: string, run: string): Promise<Path | undefined> {
  for (const folder of [joinPath(share, ...run.split('/')), share]) {
    try {
      if ((await port.statThrough(folder)).kind === 'folder') return folder;
    } catch (cause) {
      if (systemCode(cause) === undefined) throw cause;
    }
  }
  return undefined;
}

async function hashOf(port: FilePort, path: Path): Promise<string | undefined> {
  try {
    if ((await port.stat(path)).kind !== 'file') return undefined;
    const bytes = await readWhole(port, path);
    return bytes !== undefined ? sha256(bytes) : undefined;
  } catch (cause) {
    if (systemCode(cause) === undefined) throw cause;
    return undefined;
  }
}
