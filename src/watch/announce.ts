import type { InputEntry } from '../record/ledgerEntry.js';
import type { StampedInput } from '../record/runState.js';
import type { WatchEvent, WatchSession } from './watchTypes.js';

/** Says what became of a file, once, when it is committed. */
export function announceInput(session: WatchSession, run: string, entry: InputEntry, kept: StampedInput | undefined): void {
  session.onEvent({ run, file: entry.file, ...wordsFor(entry, kept) });
}

function wordsFor(entry: InputEntry, kept: StampedInput | undefined): Pick<WatchEvent, 'kind' | 'message'> {
  const reason = entry.flags?.[0]?.message ?? '';
  switch (entry.state) {
    case 'measured':
      if (kept?.state === 'measured' && kept.sha256 !== entry.sha256) {
        const how = `kinetrail amend <DIR/run> --point ${entry.sha256?.slice(0, 12)} --restore --by WHO --because WHY`;
        return {
          kind: 'replaced',
          message: `its content changed after it was measured; the first stands until a person decides (${how})`,
        };
      }
      return {
        kind: 'taken',
        message: entry.points?.length === 1 ? 'measured' : `measured: ${entry.points?.length ?? 0} time points`,
      };
    case 'set-aside':
      return { kind: 'set-aside', message: reason };
    case 'incomplete':
      return { kind: 'incomplete', message: reason };
    case 'vanished':
      return { kind: 'vanished', message: reason };
  }
}
