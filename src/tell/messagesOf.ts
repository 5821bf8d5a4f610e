import { sha256 } from '../base/sha256.js';
import type { Series } from '../series/series.js';
import type { Message } from './message.js';

/** `final` of a run is told as its final report. */
const eventNames: Readonly<Record<string, string>> = { final: 'final-report' };

/**
 * The messages that a series gives rise to: one for each state that has begun.
 *
 * @returns in the order of the states; `running` is no news
 */
export function messagesOf(series: Series, report: string | undefined): Message[] {
  return series.states
    .filter(({ state }) => state !== 'running')
    .map(({ state, since, evidence }) => makeMessage(series.run, eventNames[state] ?? state, since, evidence, report));
}

/** One message; its key depends on run, event and beginning alone. */
export function makeMessage(run: string, event: string, since: string, evidence: string, report: string | undefined): Message {
  const key = sha256(`${run}\n${event}\n${since}`).slice(0, 32);
  return { format: 'kinetrail.message/1', run, event, evidence, key, ...(report !== undefined ? { report } : {}) };
}
