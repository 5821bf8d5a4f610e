import { ok, type Result } from '../base/result.js';
import { isUtf8Name, nameText } from '../record/bytePath.js';
import { settleKey } from './planRun.js';
import type { RunWork } from './takeInRun.js';

/**
 * Records files that went away: before they could be captured (a loss that a person should know), or after (a note; their
 * results stand). Only a folder that was listed without an error says anything about its files.
 *
 * @errors those of `append`
 */
export async function noteAbsences({ session, run, listing, held, plan }: RunWork): Promise<Result<void>> {
  for (const key of plan.vanished) {
    const name = Buffer.from(key, 'latin1');
    const message = 'it was gone before it could be captured';
    const bytes = isUtf8Name(name) ? {} : { fileBase64: name.toString('base64') };
    const file = nameText(name);
    const line = await held.append({ kind: 'input', file, ...bytes, state: 'vanished', flags: [{ code: 'vanished', message }] });
    if (!line.ok) return line;
    session.settling.forget(settleKey(listing.key, key));
    session.onEvent({ kind: 'vanished', run, file, message });
  }
  if (plan.gone.length === 0) return ok(undefined);
  const message = `${plan.gone.length === 1 ? 'a file is' : `${plan.gone.length} files are`} no longer on the share; what was captured stands`;
  const line = await held.append({ kind: 'exception', name: 'gone', message, files: plan.gone });
  session.onEvent({ kind: 'note', run, message });
  return line.ok ? ok(undefined) : line;
}
