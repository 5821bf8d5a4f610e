import type { AmendmentEntry } from './ledgerEntry.js';
import type { RunState } from './runState.js';

/** A signed-off change as reports show it. */
export interface Amendment {
  readonly seq: number;
  readonly at: string;
  readonly action: AmendmentEntry['action'];
  /** SHA-256 of the raw file; absent: the whole run. */
  readonly point?: string;
  readonly block?: number;
  readonly file?: string;
  readonly by: string;
  readonly because: string;
}

/** Every amendment in the order in which it was made. */
export function amendmentsOf(state: RunState): Amendment[] {
  return state.amendments.map(({ seq, at, action, point, block, file, by, because }) => ({
    seq,
    at,
    action,
    ...(point !== undefined ? { point } : {}),
    ...(block !== undefined ? { block } : {}),
    ...(file !== undefined ? { file } : {}),
    by,
    because,
  }));
}

/** What stands for each point after all amendments: the last word of set-aside and restore counts. */
export function standingAmendments(state: RunState): Amendment[] {
  const last = new Map<string, Amendment>();
  for (const amendment of amendmentsOf(state)) {
    if (amendment.action !== 'set-aside' && amendment.action !== 'restore') continue;
    last.set(`${amendment.point} ${amendment.block ?? ''}`, amendment);
  }
  return [...last.values()];
}
