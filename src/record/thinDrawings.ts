import type { PointRecord } from '../point/pointRecord.js';

const drawnMax = 400;

/**
 * Leaves the drawings (traces, overview) out of most records of a very long run, so that ten thousand points fit into memory.
 * Flagged points keep theirs; of the others every n-th, the first and the last.
 *
 * @param index place of the record in the run, by name
 * @param count records of the run
 */
export function thinDrawings(record: PointRecord, index: number, count: number): PointRecord {
  const step = Math.ceil(count / drawnMax);
  if (step <= 1 || index % step === 0 || index === count - 1) return record;
  if (record.status !== 'accepted' && count <= drawnMax * 10) return record;
  const { overview: _overview, measurement, ...rest } = record;
  if (measurement === undefined) return rest;
  return { ...rest, measurement: { ...measurement, signals: measurement.signals.map(({ strip: _strip, ...signal }) => signal) } };
}
