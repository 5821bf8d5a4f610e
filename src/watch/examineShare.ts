import { joinPath } from '../record/bytePath.js';
import type { RecordContext } from '../record/recordContext.js';
import type { Finding } from './examine.js';
import { forkShareReader } from './forkShareReader.js';
import type { ShareListing } from './shareListing.js';
import type { ShareReader } from './shareReader.js';

const aheadLeastMs = 120_000;
const answerWithinMs = 20_000;

/** Lists the share and reads one file of it, in a process that can be ended when the share hangs. */
export async function examineShare({ clock }: RecordContext, share: string): Promise<Finding[]> {
  const reader = forkShareReader(share, answerWithinMs);
  try {
    const listed = await reader.list();
    if (!listed.ok) {
      const fix = 'Check the path, the connection and the permissions.';
      return [{ name: 'share', state: 'fail', message: listed.problem.message, fix }];
    }
    const spectra = listed.value.runs.reduce((count, run) => count + run.spectra.length, 0);
    const found: Finding = {
      name: 'share',
      state: spectra > 0 ? 'pass' : 'warn',
      message: `${listed.value.runs.length} run folders with ${spectra} spectra`,
      ...(spectra > 0 ? {} : { fix: 'A run is a folder that directly holds .jdx, .dx or .jcamp files.' }),
    };
    return [
      found,
      ...unlistedFolders(listed.value),
      ...(await readable(reader, listed.value)),
      ...clockOffset(listed.value, clock.nowMs()),
    ];
  } finally {
    await reader.close();
  }
}

function unlistedFolders({ failed }: ShareListing): Finding[] {
  return failed.map(({ path, problem }) => ({
    name: 'share',
    state: 'fail',
    message: `${path}: ${problem.message}`,
    fix: 'Check the permissions of this folder.',
  }));
}

async function readable(reader: ShareReader, { runs }: ShareListing): Promise<Finding[]> {
  const run = runs.find(({ spectra }) => spectra.some(({ stat }) => stat.kind === 'file'));
  const spectrum = run?.spectra.find(({ stat }) => stat.kind === 'file');
  if (run === undefined || spectrum === undefined) return [];
  const read = await reader.read([...run.names, spectrum.name]);
  const name = joinPath('', ...run.names, spectrum.name).toString('utf8');
  if (read.ok)
    return [{ name: 'share', state: 'pass', message: `${read.value.bytes.length} bytes of ${name} read twice, alike` }];
  return [
    { name: 'share', state: 'fail', message: `${name}: ${read.problem.message}`, fix: 'Check the permissions of the file.' },
  ];
}

/** Files from the future show that the clocks of server and computer differ; waiting goes by the local clock all the same. */
function clockOffset({ runs }: ShareListing, nowMs: number): Finding[] {
  const newestMs = Math.max(0, ...runs.flatMap(({ spectra }) => spectra.map(({ stat }) => Number(stat.modifiedNs / 1_000_000n))));
  if (newestMs === 0) return [];
  if (newestMs - nowMs < aheadLeastMs)
    return [{ name: 'share clock', state: 'pass', message: `the newest file is of ${new Date(newestMs).toISOString()}` }];
  const minutes = Math.round((newestMs - nowMs) / 60_000);
  return [
    {
      name: 'share clock',
      state: 'warn',
      message: `the newest file is ${minutes} min in the future: the clocks differ`,
      fix: 'Set both clocks by the same time server. Waiting and order do not depend on it, times from the file system do.',
    },
  ];
}
