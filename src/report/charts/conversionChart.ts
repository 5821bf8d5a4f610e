import { area, line } from 'd3-shape';
import type { Series } from '../../series/series.js';
import { formatElapsed, formatPercent } from '../formatNumber.js';
import { label, makeFrame, marker, n, wrapSvg } from './frame.js';
import { ink, seriesStyles } from './palette.js';

/**
 * Conversion against time: points with error bars (2 u), the fitted law with its 95 % band, the target and the forecast.
 * Flagged points are squares, set-aside ones do not carry a number and stand as crosses on the axis.
 */
export function conversionChart(
  series: Series,
  target: number | undefined,
): { svg: string; widthPx: number; heightPx: number; description: string } {
  const [widthPx, heightPx] = [760, 340];
  const points = series.points.filter(({ amounts, status }) => status !== 'set-aside' && amounts?.conversion !== undefined);
  const aside = series.points.filter(({ status }) => status === 'set-aside');
  const hours = (seconds: number) => seconds / 3600;
  const { curve } = series.kinetics ?? {};
  const endS = Math.max(1, ...series.points.map(({ elapsedS }) => elapsedS), series.forecast?.highS ?? 0);
  const startS = Math.min(0, ...series.points.map(({ elapsedS }) => elapsedS));
  const low = Math.min(0, ...points.map(({ amounts }) => 100 * (amounts!.conversion!.value - 2 * amounts!.conversion!.u)));
  const frame = makeFrame({
    widthPx,
    heightPx,
    x: { domain: [hours(startS), hours(endS) * 1.04], label: 'time since start / h' },
    y: { domain: [Math.max(-20, low), 104], label: 'conversion / %' },
  });
  const style = seriesStyles[0];
  const parts = [frame.svg];
  const clip = (value: number) => Math.max(frame.plot.top, Math.min(frame.plot.bottom, value));
  const shown = curve?.elapsedS.flatMap((t, index) => (t <= endS * 1.04 ? [index] : [])) ?? [];
  if (curve && shown.length > 1) {
    const band = area<number>()
      .x((i) => round(frame.x(hours(curve.elapsedS[i]!))))
      .y0((i) => round(clip(frame.y(100 * curve.low[i]!))))
      .y1((i) => round(clip(frame.y(100 * curve.high[i]!))));
    const middle = line<number>()
      .x((i) => round(frame.x(hours(curve.elapsedS[i]!))))
      .y((i) => round(clip(frame.y(100 * curve.value[i]!))));
    parts.push(
      `<path d="${band(shown) ?? ''}" fill="${style.color}" fill-opacity="0.16"/>`,
      `<path d="${middle(shown) ?? ''}" fill="none" stroke="${style.color}" stroke-width="1.4"/>`,
    );
  }
  if (target !== undefined) {
    const y = frame.y(100 * target);
    parts.push(
      `<line x1="${frame.plot.left}" x2="${frame.plot.right}" y1="${n(y)}" y2="${n(y)}" stroke="#D55E00" stroke-width="1.2" stroke-dasharray="6 3"/>`,
      label(frame.plot.left + 6, y - 5, `target ${round(100 * target)} %`, 'start', ink.text),
    );
  }
  parts.push(...forecastMark(series, frame, hours));
  for (const { elapsedS, amounts, status } of points) {
    const { value, u } = amounts!.conversion!;
    const [x, y] = [frame.x(hours(elapsedS)), frame.y(100 * value)];
    const [y1, y2] = [clip(frame.y(100 * (value - 2 * u))), clip(frame.y(100 * (value + 2 * u)))];
    parts.push(
      `<line x1="${n(x)}" x2="${n(x)}" y1="${n(y1)}" y2="${n(y2)}" stroke="${style.color}" stroke-width="1.2"/>`,
      marker(
        status === 'flagged' ? 'square' : 'circle',
        x,
        clip(y),
        style.color,
        status === 'flagged',
        points.length > 120 ? 2.2 : 3.4,
        `${formatElapsed(elapsedS)}: ${formatPercent(value, u)}${status === 'flagged' ? ', flagged' : ''}`,
      ),
    );
  }
  for (const { elapsedS } of aside) parts.push(marker('cross', frame.x(hours(elapsedS)), frame.plot.bottom - 8, ink.soft));
  if (points.length === 0)
    parts.push(
      label(
        (frame.plot.left + frame.plot.right) / 2,
        (frame.plot.top + frame.plot.bottom) / 2,
        'no conversion is stated for this run',
        'middle',
        ink.soft,
        14,
      ),
    );
  const last = points.at(-1)?.amounts?.conversion;
  const description = `${points.length} points${aside.length > 0 ? `, ${aside.length} set aside` : ''}${last ? `; the last at ${round(100 * last.value)} %` : ''}. Error bars are 2 u; flagged points are hollow squares; set-aside points are crosses on the axis.`;
  return {
    svg: wrapSvg('conversion', widthPx, heightPx, 'Conversion against time', description, parts),
    widthPx,
    heightPx,
    description,
  };
}

function forecastMark({ forecast }: Series, frame: ReturnType<typeof makeFrame>, hours: (seconds: number) => number): string[] {
  if (forecast?.elapsedS === undefined || forecast.lowS === undefined || forecast.highS === undefined) return [];
  const y = frame.y(100 * forecast.target);
  const [x1, x, x2] = [frame.x(hours(forecast.lowS)), frame.x(hours(forecast.elapsedS)), frame.x(hours(forecast.highS))];
  const isInside = x <= frame.plot.right;
  return isInside
    ? [
        `<line x1="${n(x1)}" x2="${n(Math.min(x2, frame.plot.right))}" y1="${n(y)}" y2="${n(y)}" stroke="#000000" stroke-width="3" stroke-opacity="0.75"/>`,
        marker('diamond', x, y, '#000000', true, 4),
        label(x, y + 18, 'forecast', 'middle', ink.text),
      ]
    : [];
}

const round = (value: number) => Math.round(value * 100) / 100;
