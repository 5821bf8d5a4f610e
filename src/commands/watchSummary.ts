import { join } from 'node:path';
import { nameText, pathText } from '../record/bytePath.js';
import type { OnceSummary, RunSummary } from '../watch/watchOnce.js';
import type { WatchSession } from '../watch/watchTypes.js';
import { escapeForTerminal } from './terminalText.js';

/** What a single pass prints: one line a run. */
export function onceText(session: WatchSession, { runs }: OnceSummary): string {
  if (runs.length === 0) return 'no run folders with spectra found\n';
  return runs.map((run) => `${runLine(session, run)}\n`).join('');
}

function runLine(session: WatchSession, { run, names, pointFiles, taken, unread, head }: RunSummary): string {
  const parts = [`${pointFiles} time point file${pointFiles === 1 ? '' : 's'}`, `${taken} new`];
  if (unread.length > 0) parts.push(`${unread.length} not usable`);
  if (head !== undefined) parts.push(`ledger head ${head.seq} ${head.hash.slice(0, 12)}`);
  const folder = join(pathText(session.settings.outputFolder), ...names.map(nameText));
  return escapeForTerminal(`${run}: ${parts.join(', ')}; ${folder}`);
}

/** The same for a machine. Keys may be added, never changed. */
export function onceJson(session: WatchSession, { runs, problems }: OnceSummary): string {
  const value = {
    format: 'kinetrail.watch/1',
    runs: runs.map(({ run, names, pointFiles, taken, unread, head }) => ({
      run,
      folder: join(pathText(session.settings.outputFolder), ...names.map(nameText)),
      point_files: pointFiles,
      taken,
      inputs_not_usable: unread,
      ...(head !== undefined ? { head } : {}),
    })),
    problems: problems.map(({ code, message, hint }) => ({ code, message, ...(hint !== undefined ? { hint } : {}) })),
  };
  return `${JSON.stringify(value, null, 2)}\n`;
}

/** One line for each file that could not be used. */
export function unreadLines({ runs }: OnceSummary): string[] {
  return runs.flatMap(({ run, unread }) =>
    unread.map(({ file, status, message, code }) =>
      escapeForTerminal(`error: ${run}/${file}: ${status}: ${message}   (code: ${code})`),
    ),
  );
}
