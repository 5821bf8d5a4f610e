import { resolve } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { realContext } from '../record/recordContext.js';
import { type FoundSite, findSite } from '../watch/findSite.js';
import { forkShareReader } from '../watch/forkShareReader.js';
import { makeMeasurePool } from '../watch/measurePool.js';
import { type OpenWatch, openWatch } from '../watch/openWatch.js';
import { recordRenderer } from '../watch/recordRenderer.js';
import { watchOnce } from '../watch/watchOnce.js';
import { watchShare } from '../watch/watchShare.js';
import type { WatchSettings } from '../watch/watchTypes.js';
import { exitCodes } from './exitCodes.js';
import { makeTeller } from './makeTeller.js';
import { printProblem } from './printProblem.js';
import { loadMethod } from './readInput.js';
import { stopOnSignals } from './stopOnSignals.js';
import { exitCodeOf, onceExitCode } from './watchExit.js';
import { makeWatchPrinter } from './watchPrinter.js';
import { onceJson, onceText, unreadLines } from './watchSummary.js';

export interface WatchArguments {
  share: string;
  method?: string;
  out: string;
  once: boolean;
  settle?: number;
  poll?: number;
  site?: string;
  workers?: number;
  json: boolean;
}

const settleDefaultS = 30;
const settleOnceDefaultS = 2;
const pollDefaultS = 20;
const longestWaitMs = 15 * 60_000;
const measureTimeoutMs = 180_000;
const heapMegabytes = 3072;

/** `watch <share>`: takes in every new time point until stopped, or once. */
export const watchCommand: CommandModule<object, WatchArguments> = {
  command: 'watch <share>',
  describe: 'Takes in every new time point of a share until stopped; --once makes one pass and exits',
  builder: (yargs) =>
    yargs
      .positional('share', { describe: 'folder of run folders; only ever read', type: 'string', demandOption: true })
      .option('method', { describe: 'method for runs that name none', type: 'string', requiresArg: true })
      .option('out', {
        describe: 'output folder, outside the share; made if missing',
        type: 'string',
        demandOption: true,
        requiresArg: true,
      })
      .option('once', { describe: 'make one pass and exit (for cron)', type: 'boolean', default: false })
      .option('settle', {
        describe: 'seconds a file must be quiet before it is taken in (default 30, with --once 2)',
        type: 'number',
        requiresArg: true,
      })
      .option('poll', { describe: 'seconds between two looks at the share (default 20)', type: 'number', requiresArg: true })
      .option('site', {
        describe: 'site file (default: kinetrail.yaml in, beside or above the share)',
        type: 'string',
        requiresArg: true,
      })
      .option('workers', { describe: 'processes that measure at once', type: 'number', requiresArg: true })
      .option('json', { describe: 'with --once: print one JSON object', type: 'boolean', default: false })
      .example('kinetrail watch /share --method method.yaml --out /out', 'follow a share through the night')
      .example('kinetrail watch /share --method method.yaml --out /out --once', 'one pass, from cron') as never,
  handler: async (args) => {
    process.exitCode = await watch(args);
  },
};

async function watch(args: ArgumentsCamelCase<WatchArguments>): Promise<number> {
  const wrong = wrongNumber(args);
  if (wrong !== undefined) {
    process.stderr.write(`error: ${wrong}\n`);
    return exitCodes.usage;
  }
  const context = realContext();
  const share = resolve(args.share);
  const site = await findSite(context.port, share, args.site !== undefined ? resolve(args.site) : undefined);
  if (!site.ok) {
    for (const problem of site.problem) printProblem(problem);
    return exitCodes.usage;
  }
  if (args.method !== undefined) {
    const method = await loadMethod(args.method);
    if (!method.ok) return method.problem;
  }
  const settings = settingsOf(args, share, site.value);
  const stop = stopOnSignals();
  const printer = makeWatchPrinter({ isOnce: args.once });
  const tell = makeTeller(context, site.value?.file);
  const opened = await openWatch({
    context,
    settings,
    reader: forkShareReader(share),
    measurer: makeMeasurePool({ workers: workersOf(args, site.value), timeoutMs: measureTimeoutMs, heapMegabytes }),
    renderer: recordRenderer(context.port),
    onEvent: printer.print,
    ...(tell !== undefined ? { tell } : {}),
    signal: stop.signal,
  });
  if (!opened.ok) {
    printProblem(opened.problem);
    return exitCodeOf(opened.problem);
  }
  try {
    const code = args.once ? await runOnce(opened.value, args.json) : await runOn(opened.value, printer.afterPass);
    return stop.exitCode() ?? code;
  } finally {
    await opened.value.close();
    stop.dispose();
  }
}

async function runOnce({ session }: OpenWatch, isJson: boolean): Promise<number> {
  const summary = await watchOnce(session);
  if (!summary.ok) {
    printProblem(summary.problem);
    return exitCodeOf(summary.problem);
  }
  for (const problem of summary.value.problems) printProblem(problem);
  // Named in every pass, not only when they are first seen: a cron job has no memory.
  for (const line of unreadLines(summary.value)) process.stderr.write(`${line}\n`);
  process.stdout.write(isJson ? onceJson(session, summary.value) : onceText(session, summary.value));
  return onceExitCode(summary.value);
}

async function runOn({ session }: OpenWatch, afterPass: ReturnType<typeof makeWatchPrinter>['afterPass']): Promise<number> {
  process.stderr.write(`watching ${session.settings.share}; Ctrl-C stops\n`);
  await watchShare(session, { onPass: async (pass) => afterPass(session, pass) });
  process.stderr.write('stopped; every result that was acknowledged is in the record\n');
  return exitCodes.done;
}

function settingsOf(args: WatchArguments, share: string, site: FoundSite | undefined): WatchSettings & { outputFolder: string } {
  const settleS = args.settle ?? site?.file.settleS ?? (args.once ? settleOnceDefaultS : settleDefaultS);
  const pollS = args.poll ?? site?.file.pollS ?? pollDefaultS;
  return {
    share,
    outputFolder: resolve(args.out),
    settleMs: settleS * 1000,
    isOnce: args.once,
    pollMs: pollS * 1000,
    longestWaitMs: args.once ? 0 : Math.max(longestWaitMs, 3000 * settleS),
    ...(args.method !== undefined ? { methodPath: resolve(args.method) } : {}),
    ...(site?.file.silentAfterMin !== undefined ? { silentAfterMs: site.file.silentAfterMin * 60_000 } : {}),
    ...(site !== undefined ? { site } : {}),
  };
}

function workersOf(args: WatchArguments, site: FoundSite | undefined): number {
  return args.workers ?? site?.file.workers ?? 2;
}

function wrongNumber({ settle, poll, workers }: WatchArguments): string | undefined {
  if (settle !== undefined && !(settle >= 0 && settle <= 86_400)) return '--settle must be a number of seconds, 0 to 86400';
  if (poll !== undefined && !(poll > 0 && poll <= 86_400)) return '--poll must be a number of seconds, above 0, up to 86400';
  if (workers !== undefined && !(Number.isInteger(workers) && workers >= 1 && workers <= 64))
    return '--workers must be a whole number, 1 to 64';
  return undefined;
}
