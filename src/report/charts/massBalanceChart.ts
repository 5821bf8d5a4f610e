import type { Series } from '../../series/series.js';
import { label, makeFrame, marker, n, wrapSvg } from './frame.js';
import { ink, seriesStyles } from './palette.js';

/** Amount of the followed chain over that at time zero, with error bars (2 u). Absent on a relative scale, where it says nothing. */
export function massBalanceChart(series: Series) {
  const points = series.points.flatMap(({ elapsedS, status, amounts }) =>
    status !== 'set-aside' && amounts?.massBalance ? [{ elapsedS, status, ...amounts.massBalance }] : [],
  );
  if (points.length < 2) return undefined;
  const [widthPx, heightPx] = [760, 220];
  const low = Math.min(0.9, ...points.map(({ value, u }) => value - 2 * u));
  const high = Math.max(1.1, ...points.map(({ value, u }) => value + 2 * u));
  const frame = makeFrame({
    widthPx,
    heightPx,
    x: { domain: hoursOf(points), label: 'time since start / h' },
    y: { domain: [Math.max(0, low), Math.min(3, high)], label: 'mass balance', ticks: 4 },
  });
  const style = seriesStyles[0];
  const parts = [
    frame.svg,
    `<line x1="${frame.plot.left}" x2="${frame.plot.right}" y1="${n(frame.y(1))}" y2="${n(frame.y(1))}" stroke="${ink.soft}" stroke-width="1" stroke-dasharray="4 3"/>`,
    label(frame.plot.right - 2, frame.y(1) - 5, 'nothing lost', 'end'),
    ...points.flatMap(({ elapsedS, status, value, u }) => {
      const x = frame.x(elapsedS / 3600);
      return [
        `<line x1="${n(x)}" x2="${n(x)}" y1="${n(frame.y(value - 2 * u))}" y2="${n(frame.y(value + 2 * u))}" stroke="${style.color}" stroke-width="1.2"/>`,
        marker(status === 'flagged' ? 'square' : 'circle', x, frame.y(value), style.color, status === 'flagged'),
      ];
    }),
  ];
  const description = `Starting material and all that formed from it, over the amount at time zero, at ${points.length} points; a drift points to precipitation, evaporation or an unseen species. Error bars are 2 u.`;
  return { svg: wrapSvg('balance', widthPx, heightPx, 'Mass balance', description, parts), widthPx, heightPx, description };
}

function hoursOf(points: readonly { elapsedS: number }[]): [number, number] {
  const times = points.map(({ elapsedS }) => elapsedS / 3600);
  return [Math.min(0, ...times), Math.max(1 / 60, ...times)];
}
