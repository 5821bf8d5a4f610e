import { line } from 'd3-shape';
import type { SeriesPoint } from '../../series/series.js';
import { label, makeFrame, marker, wrapSvg } from './frame.js';
import { ink, seriesStyles } from './palette.js';

/** How far a signal's shift moved from where it first stood, point by point: one small chart a signal. */
export function driftChart(id: string, points: readonly SeriesPoint[], key: string, title: string) {
  const all = points.flatMap(({ elapsedS, record }) => {
    const signal = record.measurement?.signals.find((entry) => entry.key === key);
    return signal && signal.verdict !== 'absent' ? [{ elapsedS, shiftPpm: signal.shiftPpm }] : [];
  });
  const first = all[0];
  if (all.length < 3 || first === undefined) return undefined;
  const [widthPx, heightPx] = [360, 300];
  const moved = all.map(({ elapsedS, shiftPpm }) => ({ elapsedS, movedPpb: 1000 * (shiftPpm - first.shiftPpm) }));
  const most = Math.max(1, ...moved.map(({ movedPpb }) => Math.abs(movedPpb))) * 1.15;
  const hours = points.map(({ elapsedS }) => elapsedS / 3600);
  const frame = makeFrame({
    widthPx,
    heightPx,
    x: { domain: [Math.min(0, ...hours), Math.max(1 / 60, ...hours)], label: 'time since start / h', ticks: 5 },
    y: { domain: [-most, most], label: 'shift moved / 0.001 ppm', ticks: 4 },
  });
  const path = line<(typeof moved)[number]>()
    .x(({ elapsedS }) => Math.round(frame.x(elapsedS / 3600) * 10) / 10)
    .y(({ movedPpb }) => Math.round(frame.y(movedPpb) * 10) / 10)(moved);
  const style = seriesStyles[2];
  const parts = [
    frame.svg,
    `<path d="${path ?? ''}" fill="none" stroke="${style.color}" stroke-width="1"/>`,
    ...(moved.length <= 60
      ? moved.map(({ elapsedS, movedPpb }) =>
          marker(style.marker, frame.x(elapsedS / 3600), frame.y(movedPpb), style.color, false, 2),
        )
      : []),
    label(frame.plot.left + 4, frame.plot.top + 10, `from ${first.shiftPpm.toFixed(3)} ppm`, 'start', ink.soft, 10.5),
  ];
  const spanPpm = Math.max(...moved.map(({ movedPpb }) => movedPpb)) - Math.min(...moved.map(({ movedPpb }) => movedPpb));
  const description = `It moved within ${(spanPpm / 1000).toFixed(4)} ppm.`;
  return { svg: wrapSvg(id, widthPx, heightPx, title, description, parts), widthPx, heightPx, description };
}
