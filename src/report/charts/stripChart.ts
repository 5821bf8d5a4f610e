import { line } from 'd3-shape';
import type { MeasuredSignal } from '../../signal/measured.js';
import { label, makeFrame, n, wrapSvg } from './frame.js';
import { ink, seriesStyles } from './palette.js';

/** One diagnostic signal at one time point: data, fitted pattern, expected lines as sticks, and what is left over below. */
export function stripChart(
  id: string,
  signal: MeasuredSignal,
  title: string,
): { svg: string; widthPx: number; heightPx: number; description: string } | undefined {
  const strip = signal.strip;
  if (!strip || strip.data.length < 4) return undefined;
  const [widthPx, heightPx] = [300, 220];
  const { data, fit, firstPpm, stepPpm } = strip;
  const most = Math.max(...data, ...fit, 1e-12);
  const rest = data.map((value, index) => value - (fit[index] ?? 0));
  const lastPpm = firstPpm - (data.length - 1) * stepPpm;
  // What is left over stands clear below the data, however noisy both are.
  const restShift = Math.min(0, ...data) - 0.14 * most - Math.max(0, ...rest);
  const frame = makeFrame({
    widthPx,
    heightPx,
    x: { domain: [firstPpm, lastPpm], label: 'chemical shift / ppm', ticks: 4 },
    y: { domain: [restShift + Math.min(0, ...rest) - 0.12 * most, 1.08 * most], label: '', hidden: true },
  });
  const x = (index: number) => Math.round(frame.x(firstPpm - index * stepPpm) * 100) / 100;
  const path = (values: readonly number[], shift = 0) =>
    line<number>()
      .x((_, index) => x(index))
      .y((value) => Math.round(frame.y(value + shift) * 100) / 100)([...values]) ?? '';
  const sticks = strip.sticks
    .filter(({ shiftPpm }) => shiftPpm <= firstPpm && shiftPpm >= lastPpm)
    .map(({ shiftPpm, height, signal: key }) => {
      const color = key === signal.key ? seriesStyles[1].color : ink.soft;
      const top = frame.y(Math.max(0, Math.min(1.05 * most, height)));
      return `<line x1="${n(frame.x(shiftPpm))}" x2="${n(frame.x(shiftPpm))}" y1="${n(frame.y(0))}" y2="${n(top)}" stroke="${color}" stroke-width="1.1" stroke-dasharray="2 2"/>`;
    });
  const parts = [
    frame.svg,
    ...sticks,
    `<path d="${path(data)}" fill="none" stroke="${ink.data}" stroke-width="1.1"/>`,
    `<path d="${path(fit)}" fill="none" stroke="${seriesStyles[1].color}" stroke-width="1.5" stroke-opacity="0.85"/>`,
    `<path d="${path(rest, restShift)}" fill="none" stroke="${seriesStyles[0].color}" stroke-width="0.9"/>`,
    label(frame.plot.left + 2, frame.y(restShift + Math.max(0, ...rest)) - 4, 'left over', 'start', ink.soft, 9.5),
  ];
  const description = `${signal.words.charAt(0).toUpperCase()}${signal.words.slice(1)}.`;
  return { svg: wrapSvg(id, widthPx, heightPx, title, description, parts), widthPx, heightPx, description };
}
