import type { SeriesPoint } from '../../series/series.js';
import { driftChart } from '../charts/driftChart.js';
import { stackChart } from '../charts/stackChart.js';
import { stripChart } from '../charts/stripChart.js';
import { formatElapsed, formatQuantity, formatValue } from '../formatNumber.js';
import type { ReportInput } from '../reportInput.js';
import type { Block, Section } from '../reportModel.js';

const flaggedShownMax = 4;
const legend =
  'In each drawing of a fit: the data in grey, the fitted pattern over it, its expected lines as dashed sticks, and below what is left over, all on one scale. Drawings are thinned by minimum and maximum per column.';

/** Per diagnostic signal: traces through time, and the fitted pattern at the first, the middle and the last point. */
export function signalsSection({ series, method }: ReportInput): Section {
  const usable = series.points.filter(({ status, record }) => status !== 'set-aside' && record.measurement);
  const blocks: Block[] = [];
  const chosen = choosePoints(usable);
  const signals = method.species.flatMap(({ name, signals: own }) =>
    own.filter(({ use }) => use !== 'ignore').map((signal) => ({ name, signal })),
  );
  if (chosen.length > 0) blocks.push({ kind: 'text', tone: 'note', text: legend });
  blocks.push(
    verdictTable(
      chosen,
      signals.map(({ signal }) => signal.key),
    ),
  );
  signals.forEach(({ name, signal }, index) => {
    blocks.push(...signalBlocks(usable, chosen, signal.key, `${name}, ${signal.id}`, index));
  });
  if (usable.length === 0) blocks.push({ kind: 'text', text: 'No time point with measured signals yet.' });
  return { id: 'signals', heading: 'Diagnostic signals', blocks };
}

/** Through time above; below, the fit at each chosen point, three in a row. */
function signalBlocks(
  usable: readonly SeriesPoint[],
  chosen: readonly SeriesPoint[],
  key: string,
  name: string,
  index: number,
): Block[] {
  const blocks: Block[] = [];
  const stack = stackChart(`stack-${index}`, usable, key, `${name}: through time`);
  if (stack) blocks.push({ kind: 'figure', title: 'Traces through time', perRow: 2, ...stack });
  const drift = driftChart(`drift-${index}`, usable, key, `${name}: shift through time`);
  if (drift) blocks.push({ kind: 'figure', title: 'Shift through time', perRow: 2, ...drift });
  chosen.forEach((point, place) => {
    const measured = point.record.measurement!.signals.find((signal) => signal.key === key);
    const title = `${formatElapsed(point.elapsedS)}, ${point.file}`;
    const strip = measured ? stripChart(`strip-${index}-${place}`, measured, `${name}: ${title}`) : undefined;
    if (strip) blocks.push({ kind: 'figure', title, perRow: 3, ...strip });
  });
  return blocks.length > 0 ? [{ kind: 'subheading', text: name }, ...blocks] : [];
}

/** First, middle, last, and a few flagged ones in between. */
function choosePoints(points: readonly SeriesPoint[]): SeriesPoint[] {
  if (points.length === 0) return [];
  const places = new Set([0, Math.floor((points.length - 1) / 2), points.length - 1]);
  let flagged = 0;
  points.forEach(({ status }, index) => {
    if (status === 'flagged' && flagged < flaggedShownMax && points.length <= 60) {
      if (!places.has(index)) flagged += 1;
      places.add(index);
    }
  });
  return [...places].sort((a, b) => a - b).map((index) => points[index]!);
}

function verdictTable(points: readonly SeriesPoint[], keys: readonly string[]): Block {
  const columns = [
    { head: 'signal', align: 'left' as const, weight: 2 },
    { head: 'point', align: 'left' as const, weight: 1.7 },
    { head: 'shift / ppm', align: 'right' as const, weight: 1.2 },
    { head: 'width / Hz', align: 'right' as const, weight: 1.1 },
    { head: 'area (u)', align: 'right' as const, weight: 2.6 },
    { head: 'verdict', align: 'left' as const, weight: 1.2 },
    { head: 'in words', align: 'left' as const, weight: 4.6 },
  ];
  const rows = keys.flatMap((key) =>
    points.flatMap((point) => {
      const signal = point.record.measurement!.signals.find((entry) => entry.key === key);
      if (!signal) return [];
      return [
        [
          key,
          point.file,
          formatValue(signal.shiftPpm, 0.0005),
          signal.widthHz.toFixed(2),
          formatQuantity(signal.area, signal.u),
          signal.verdict,
          signal.words,
        ],
      ];
    }),
  );
  return { kind: 'table', caption: 'Verdict per signal at the points shown', columns, rows, small: true };
}
