import type { Flag } from '../base/flag.js';

/** The status that a set of reasons leads to: the weightiest one decides; notes change nothing. */
export function statusOf(flags: readonly Flag[]): 'accepted' | 'flagged' | 'set-aside' {
  if (flags.some((flag) => flag.weight === 'set-aside')) return 'set-aside';
  return flags.some((flag) => flag.weight !== 'note') ? 'flagged' : 'accepted';
}
