import { pathText } from '../record/bytePath.js';
import { runFolderOf } from '../watch/runFolder.js';
import { runNameOf } from '../watch/takeInRun.js';
import type { PassOutcome } from '../watch/watchPass.js';
import type { WatchEvent, WatchSession } from '../watch/watchTypes.js';
import { problemText } from './printProblem.js';
import { escapeForTerminal } from './terminalText.js';

export interface WatchPrinter {
  print(event: WatchEvent): void;
  afterPass(session: WatchSession, pass: PassOutcome): void;
}

const errorKinds: ReadonlySet<WatchEvent['kind']> = new Set(['set-aside', 'incomplete']);

/**
 * Prints what happens to stderr: one line an event; on a terminal also a block with one line a run that is drawn anew after
 * each pass.
 */
export function makeWatchPrinter({ isOnce }: { isOnce: boolean }, stream: NodeJS.WriteStream = process.stderr): WatchPrinter {
  const isLiving = !isOnce && stream.isTTY === true && process.env.TERM !== 'dumb';
  const waitingTold = new Map<string, string>();
  let blockLines = 0;
  const clear = () => {
    if (blockLines > 0) stream.write(`\x1b[${blockLines}A\x1b[J`);
    blockLines = 0;
  };
  return {
    print: (event) => {
      if (event.kind === 'waiting' && isRepeated(waitingTold, event)) return;
      // A single pass names every unusable file at its end.
      if (isOnce && errorKinds.has(event.kind)) return;
      clear();
      stream.write(`${eventLine(event)}\n`);
    },
    afterPass: (session, pass) => {
      if (!isLiving) return;
      clear();
      const lines = pass.listing.runs.map((listing) =>
        blockLine(session, pass, runNameOf(session, listing), pathText(runFolderOf(session, listing))),
      );
      stream.write(lines.map((line) => `${line}\n`).join(''));
      blockLines = lines.length;
    },
  };
}

function isRepeated(told: Map<string, string>, { run, file, message }: WatchEvent): boolean {
  const key = `${run} ${file}`;
  if (told.get(key) === message) return true;
  told.set(key, message);
  return false;
}

/** One event, one line: nothing in a name or a title can break out of it. */
export function eventLine(event: WatchEvent): string {
  const { kind, run, file, message, problem } = event;
  if (problem !== undefined) return `${run !== undefined ? `${escapeForTerminal(run)}: ` : ''}${problemText(problem)}`;
  const place = [run, file].filter((part) => part !== undefined).join('/');
  const head = errorKinds.has(kind) ? `error: ${place}: ${kind}: ` : place === '' ? '' : `${place}: `;
  return escapeForTerminal(`${head}${message}`);
}

function blockLine(session: WatchSession, pass: PassOutcome, run: string, folder: string): string {
  const outcome = pass.runs.find((other) => other.run === run);
  const series = session.series.get(folder);
  const last = series?.points.findLast(({ amounts }) => amounts?.conversion !== undefined);
  const conversion = last?.amounts?.conversion;
  const parts = [
    series !== undefined ? `${series.points.length} points` : 'no new points',
    conversion !== undefined ? `conversion ${(100 * conversion.value).toFixed(1)} %` : undefined,
    forecastWords(series, last?.elapsedS),
    outcome?.waitMs !== undefined ? `waits for files to come to rest (${Math.ceil(outcome.waitMs / 1000)} s)` : undefined,
    outcome !== undefined && outcome.problems.length > 0 ? `${outcome.problems.length} problems` : undefined,
  ];
  const width = Math.max(20, (process.stderr.columns ?? 100) - 1);
  return escapeForTerminal(`${run}: ${parts.filter((part) => part !== undefined).join(', ')}`).slice(0, width);
}

function forecastWords(series: ReturnType<WatchSession['series']['get']>, elapsedS: number | undefined): string | undefined {
  const at = series?.forecast?.elapsedS;
  if (at === undefined || elapsedS === undefined) return undefined;
  const minutes = Math.round((at - elapsedS) / 60);
  return minutes > 0 ? `target in about ${minutes} min` : 'target reached';
}
