import { join } from 'node:path';
import { realContext } from '../record/recordContext.js';
import { findSite } from '../watch/findSite.js';
import { forkShareReader } from '../watch/forkShareReader.js';
import { makeMeasurePool } from '../watch/measurePool.js';
import { openWatch } from '../watch/openWatch.js';
import { recordRenderer } from '../watch/recordRenderer.js';
import { watchOnce } from '../watch/watchOnce.js';
import { exitCodes } from './exitCodes.js';
import { printProblem } from './printProblem.js';
import { exitCodeOf, onceExitCode } from './watchExit.js';
import { makeWatchPrinter } from './watchPrinter.js';

/** One pass over a share that holds its own site file: the whole of `watch --once`, without its printed summary. */
export async function followOnce(share: string, outputFolder: string): Promise<number> {
  const context = realContext();
  const site = await findSite(context.port, share, join(share, 'kinetrail.yaml'));
  if (!site.ok) {
    for (const problem of site.problem) printProblem(problem);
    return exitCodes.usage;
  }
  const opened = await openWatch({
    context,
    settings: {
      share,
      outputFolder,
      settleMs: 0,
      isOnce: true,
      pollMs: 1000,
      longestWaitMs: 0,
      ...(site.value !== undefined ? { site: site.value } : {}),
    },
    reader: forkShareReader(share),
    measurer: makeMeasurePool({ workers: 2, timeoutMs: 180_000, heapMegabytes: 3072 }),
    renderer: recordRenderer(context.port),
    onEvent: makeWatchPrinter({ isOnce: true }).print,
  });
  if (!opened.ok) {
    printProblem(opened.problem);
    return exitCodeOf(opened.problem);
  }
  try {
    const summary = await watchOnce(opened.value.session);
    if (!summary.ok) {
      printProblem(summary.problem);
      return exitCodeOf(summary.problem);
    }
    for (const problem of summary.value.problems) printProblem(problem);
    return onceExitCode(summary.value);
  } finally {
    await opened.value.close();
  }
}
