import { deriveSeries } from '../series/deriveSeries.js';
import type { Series } from '../series/series.js';
import type { SeriesInputs } from '../series/seriesInputs.js';
import { amendmentsOf } from './amendmentsOf.js';
import type { RunContents } from './runContents.js';
import type { RunState } from './runState.js';

/** Hands the record's contents to the series, as a set. */
export function deriveRunSeries(contents: RunContents, state: RunState): Series {
  return deriveSeries(seriesInputsOf(contents, state));
}

export function seriesInputsOf({ run, method, runFile, files, inputs }: RunContents, state: RunState): SeriesInputs {
  const points = files.flatMap(({ file, records, modifiedUtc }) =>
    records.map((record) => ({ file, record, ...(modifiedUtc !== undefined ? { modified: modifiedUtc } : {}) })),
  );
  const amendments = amendmentsOf(state).flatMap(({ action, point, block, by, because, at }) => {
    if (point === undefined || (action !== 'set-aside' && action !== 'restore' && action !== 'comment')) return [];
    return [{ kind: action, point, ...(block !== undefined ? { block } : {}), by, because, at }];
  });
  return { run, method, runFile, points, inputs, amendments };
}
