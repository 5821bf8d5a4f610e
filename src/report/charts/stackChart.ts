import { line } from 'd3-shape';
import type { SeriesPoint } from '../../series/series.js';
import { label, makeFrame, wrapSvg } from './frame.js';
import { ink } from './palette.js';

const tracesMax = 14;

/** The traces of one diagnostic region through time, oldest at the bottom: a reader sees material fade or grow. */
export function stackChart(
  id: string,
  points: readonly SeriesPoint[],
  key: string,
  title: string,
): { svg: string; widthPx: number; heightPx: number; description: string } | undefined {
  const all = points.flatMap(({ record, elapsedS }) => {
    const strip = record.measurement?.signals.find((signal) => signal.key === key)?.strip;
    return strip ? [{ strip, elapsedS }] : [];
  });
  if (all.length < 3) return undefined;
  const traces = thin(all);
  const [widthPx, heightPx] = [360, 300];
  const firstPpm = Math.max(...traces.map(({ strip }) => strip.firstPpm));
  const lastPpm = Math.min(...traces.map(({ strip }) => strip.firstPpm - (strip.data.length - 1) * strip.stepPpm));
  // Strips are drawn in units of their scale, so heights compare from point to point.
  const most = Math.max(...traces.flatMap(({ strip }) => strip.data.map((value) => value * strip.scale)), 1e-12);
  const rise = 0.55 / traces.length;
  const frame = makeFrame({
    widthPx,
    heightPx,
    x: { domain: [firstPpm, lastPpm], label: 'chemical shift / ppm', ticks: 5 },
    y: { domain: [-0.04, 1 + rise * (traces.length - 1)], label: '', hidden: true },
    marginRightPx: 52,
  });
  const parts = [frame.svg];
  traces.forEach(({ strip, elapsedS }, index) => {
    const base = index * rise;
    const path = line<number>()
      .x((_, k) => Math.round(frame.x(strip.firstPpm - k * strip.stepPpm) * 10) / 10)
      .y((value) => Math.round(frame.y((value * strip.scale) / most + base) * 10) / 10)([...strip.data]);
    const opacity = 0.5 + (0.5 * index) / Math.max(1, traces.length - 1);
    parts.push(
      `<path d="${path ?? ''}" fill="none" stroke="${ink.data}" stroke-opacity="${opacity.toFixed(2)}" stroke-width="1"/>`,
    );
    if (index === 0 || index === traces.length - 1)
      parts.push(label(frame.plot.right + 4, frame.y(base) + 3, `${(elapsedS / 3600).toFixed(1)} h`, 'start', ink.soft, 10));
  });
  const description = `${traces.length} of ${all.length} points, the first at the bottom, on one scale.`;
  return { svg: wrapSvg(id, widthPx, heightPx, title, description, parts), widthPx, heightPx, description };
}

function thin<T>(entries: readonly T[]): T[] {
  if (entries.length <= tracesMax) return [...entries];
  return Array.from({ length: tracesMax }, (_, k) => entries[Math.round((k * (entries.length - 1)) / (tracesMax - 1))]!);
}
