import type { Flag } from '../base/flag.js';
import type { RunFile } from '../method/method.js';
import type { PointRecord } from '../point/pointRecord.js';
import { statusOf } from '../point/statusOf.js';
import { compare } from './deriveSeries.js';
import type { SeriesInputs } from './seriesInputs.js';

/** A point with its place in time. */
export interface OrderedPoint {
  readonly file: string;
  readonly sha256: string;
  readonly block?: number;
  readonly acquired: string;
  readonly elapsedS: number;
  readonly status: 'accepted' | 'flagged' | 'set-aside';
  readonly flags: readonly Flag[];
  readonly record: PointRecord;
}

/**
 * Orders points by time of acquisition; equal times by file name, hash and block. Time zero is the run file's, else the first
 * usable point's.
 *
 * @returns the same order for the same set; a time taken from the file system, or shared by two points, is flagged
 */
export function orderPoints(points: SeriesInputs['points'], runFile: RunFile): OrderedPoint[] {
  const timed = points.map(({ file, record, modified }) => {
    const acquired = record.acquired ?? modified ?? '1970-01-01T00:00:00Z';
    const missing: Flag[] = record.acquired === undefined ? [timeFlag(modified)] : [];
    return { file, record, acquired, ms: Date.parse(acquired), flags: [...record.flags, ...missing] };
  });
  timed.sort(
    (a, b) =>
      a.ms - b.ms ||
      compare(a.file, b.file) ||
      compare(a.record.sha256, b.record.sha256) ||
      (a.record.block ?? 0) - (b.record.block ?? 0),
  );
  const firstUsable = timed.find(({ record }) => record.status !== 'set-aside') ?? timed[0];
  const zeroMs = runFile.started !== undefined ? Date.parse(runFile.started) : (firstUsable?.ms ?? 0);
  return timed.map(({ file, record, acquired, ms, flags }, index) => {
    const isShared = timed[index - 1]?.ms === ms || timed[index + 1]?.ms === ms;
    const all: Flag[] = isShared
      ? [
          ...flags,
          {
            code: 'time-shared',
            message: `another time point states the same time of acquisition, ${acquired}; ordered by name`,
          },
        ]
      : flags;
    const { block } = record;
    return {
      file,
      sha256: record.sha256,
      ...(block !== undefined ? { block } : {}),
      acquired,
      elapsedS: (ms - zeroMs) / 1000,
      status: record.status === 'set-aside' ? 'set-aside' : statusOf(all),
      flags: all,
      record,
    };
  });
}

function timeFlag(modified: string | undefined): Flag {
  const message =
    modified !== undefined
      ? `the file states no usable time; its modification time ${modified} is used`
      : 'the file states no usable time';
  return { code: 'time-from-file-system', message };
}
