import { fail, type Result } from '../base/result.js';
import { makeKillable } from './killableProcess.js';
import { type RunListing, type ShareListing, shareProblem } from './shareListing.js';
import { readProblem, type ShareReader, type StableRead } from './shareReader.js';
import type { ShareRequest } from './shareWorker.js';

const listTimeoutMs = 60_000;
const readTimeoutMs = 60_000;
const workerModule = new URL('./shareWorker.js', import.meta.url);

/** Reads the share from a process that is killed when the share hangs; the watcher itself never waits on it. */
export function forkShareReader(share: string, timeoutMs?: number): ShareReader {
  const worker = makeKillable({ module: workerModule, args: [share] });
  const ask = (request: ShareRequest, limitMs: number) => worker.ask(request, timeoutMs ?? limitMs);
  const read = async (request: ShareRequest): Promise<Result<StableRead>> => {
    const outcome = await ask(request, readTimeoutMs);
    if ('died' in outcome) return fail(readProblem('unreadable', `it cannot be read: ${outcome.died}`, 'later'));
    return outcome.answer as Result<StableRead>;
  };
  return {
    list: async () => {
      const outcome = await ask({ ask: 'list' }, listTimeoutMs);
      if ('died' in outcome) return fail(shareProblem('share-away', `the share cannot be listed: ${outcome.died}`, undefined));
      return withBuffers(outcome.answer as Result<ShareListing>);
    },
    read: (names) => read({ ask: 'read', names }),
    readPath: (path) => read({ ask: 'readPath', path }),
    close: () => worker.close(),
  };
}

/** Bytes come through the channel as plain arrays of bytes. */
function withBuffers(listing: Result<ShareListing>): Result<ShareListing> {
  if (!listing.ok) return listing;
  const toBuffers = (runs: readonly RunListing[]) =>
    runs.map((run) => ({
      ...run,
      names: run.names.map((name) => Buffer.from(name)),
      spectra: run.spectra.map((spectrum) => ({ ...spectrum, name: Buffer.from(spectrum.name) })),
    }));
  const { runs, emptied } = listing.value;
  return { ok: true, value: { ...listing.value, runs: toBuffers(runs), emptied: toBuffers(emptied) } };
}
