import type { Problem } from '../base/result.js';
import type { OnceSummary } from '../watch/watchOnce.js';
import { exitCodes } from './exitCodes.js';

/** The exit code that a problem stands for. */
export function exitCodeOf({ code, area }: Problem): number {
  switch (code) {
    case 'share-away':
      return exitCodes.shareAway;
    case 'disk-full':
      return exitCodes.noSpace;
    case 'record-held':
    case 'ledger-changed':
      return exitCodes.held;
    case 'ledger-damaged':
    case 'ledger-resaved':
    case 'ledger-missing':
    case 'object-damaged':
    case 'object-missing':
      return exitCodes.damaged;
    case 'share-not-a-folder':
    case 'output-nested':
    case 'output-not-a-folder':
    case 'output-not-writable':
    case 'method-none':
    case 'method-unreadable':
    case 'run-file-unreadable':
    case 'record-missing':
    case 'record-empty':
      return exitCodes.usage;
    default:
      return area === 'method' || area === 'pattern' || area === 'usage' ? exitCodes.usage : exitCodes.fault;
  }
}

/** When several things went wrong, the one that asks for a person first decides. */
const order = [exitCodes.fault, exitCodes.damaged, exitCodes.noSpace, exitCodes.held, exitCodes.shareAway, exitCodes.usage];

/** The exit code of a single pass. */
export function onceExitCode({ runs, problems }: OnceSummary): number {
  const codes = new Set(problems.map(exitCodeOf));
  const hasFault = runs.some(({ unread }) => unread.some(({ code }) => code === 'program-fault'));
  if (hasFault) codes.add(exitCodes.fault);
  const first = order.find((code) => codes.has(code));
  if (first !== undefined) return first;
  return runs.some(({ unread }) => unread.length > 0) ? exitCodes.someUnread : exitCodes.done;
}
