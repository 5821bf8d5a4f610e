import { ok, type Result } from '../base/result.js';
import type { Path } from './filePort.js';
import type { ToldEntry } from './ledgerEntry.js';
import type { LedgerLine } from './ledgerLine.js';
import type { RecordContext } from './recordContext.js';
import { holdRecord } from './runRecord.js';

export type Told = Omit<ToldEntry, 'kind'>;

/** Every message that was sent or tried, in order. */
export function readTold(lines: readonly LedgerLine[]): readonly Told[] {
  return lines.flatMap(({ entry }) => {
    if (entry.kind !== 'told') return [];
    const { event, to, state, key, message } = entry;
    return [{ event, to, state, key, ...(message !== undefined ? { message } : {}) }];
  });
}

/**
 * Records messages that were sent or tried. They change no number and do not move the head that carries data.
 *
 * @param folder the run's output folder
 * @errors those of `holdRecord` and of `append`
 */
export async function appendTold(
  context: RecordContext,
  folder: Path,
  run: string,
  told: readonly Told[],
): Promise<Result<void>> {
  if (told.length === 0) return ok(undefined);
  const held = await holdRecord({ context, outputFolder: folder, names: [], run });
  if (!held.ok) return held;
  try {
    for (const one of told) {
      const line = await held.value.append({ kind: 'told', ...one });
      if (!line.ok) return line;
    }
    return ok(undefined);
  } finally {
    await held.value.release();
  }
}
