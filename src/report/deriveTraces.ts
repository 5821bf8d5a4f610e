import type { SeriesPoint } from '../series/series.js';
import { visible } from './escapeMarkup.js';
import { formatElapsed } from './formatNumber.js';
import type { ReportInput } from './reportInput.js';
import type { TracePoint, Traces } from './reportModel.js';

const digits = 'ABCDEFGHIJKLMNOPQRSTUVWXYZabcdefghijklmnopqrstuvwxyz0123456789-_';
const columnsMax = 420;
const stripColumnsMax = 160;
const charactersMax = 2_400_000;

/**
 * Drawings of the time points, small enough to travel in the page: thinned by minimum and maximum, each value in 1/4000 of the
 * tallest and two characters. When all points would be too much, every n-th travels, with the first, the last and the flagged ones.
 *
 * @returns undefined when no point has a drawing
 */
export function deriveTraces({ series }: ReportInput): Traces | undefined {
  const drawn = series.points.filter(({ record }) => record.overview || record.measurement?.signals.some(({ strip }) => strip));
  const first = drawn[0];
  if (first === undefined) return undefined;
  const each = Math.max(1, sizeOf(tracePoint(first)));
  const fits = Math.max(10, Math.floor(charactersMax / each));
  const step = Math.ceil(drawn.length / fits);
  const kept = drawn.filter((_, index) => index % step === 0 || index === drawn.length - 1);
  const left = kept.length < drawn.length ? `; ${kept.length} of ${drawn.length} time points` : '';
  return { note: `Thinned by minimum and maximum per column${left}.`, points: kept.map(tracePoint) };
}

function tracePoint({ file, block, elapsedS, status, record }: SeriesPoint): TracePoint {
  const { overview, measurement } = record;
  const signals = measurement?.signals ?? [];
  return {
    label: visible(
      `${formatElapsed(elapsedS)} \u00b7 ${file}${block !== undefined ? `, block ${block}` : ''}${status === 'accepted' ? '' : ` \u00b7 ${status}`}`,
    ),
    words: signals.map(({ key, words }) => visible(`${key}: ${words}`)),
    ...(overview ? { overview: packOverview(overview) } : {}),
    strips: signals.flatMap(({ key, strip }) => {
      if (!strip || strip.data.length < 4) return [];
      const step = Math.ceil(strip.data.length / stripColumnsMax);
      const [low, high] = [Math.min(0, ...strip.data, ...strip.fit), Math.max(...strip.data, ...strip.fit, 1e-12)];
      const pick = (values: readonly number[]) =>
        pack(
          values.filter((_, index) => index % step === 0),
          low,
          high,
        );
      return [
        { signal: key, firstPpm: strip.firstPpm, stepPpm: strip.stepPpm * step, data: pick(strip.data), fit: pick(strip.fit) },
      ];
    }),
  };
}

function packOverview({
  firstPpm,
  lastPpm,
  low,
  high,
}: NonNullable<SeriesPoint['record']['overview']>): NonNullable<TracePoint['overview']> {
  const step = Math.ceil(high.length / columnsMax);
  const columns = Array.from({ length: Math.ceil(high.length / step) }, (_, k) => k * step);
  const lows = columns.map((k) => Math.min(...low.slice(k, k + step)));
  const highs = columns.map((k) => Math.max(...high.slice(k, k + step)));
  const [least, most] = [Math.min(0, ...lows), Math.max(1e-12, ...highs)];
  return { firstPpm, lastPpm, low: pack(lows, least, most), high: pack(highs, least, most) };
}

const pairs = Array.from({ length: 4096 }, (_, level) => `${digits[level >> 6]}${digits[level & 63]}`);

function pack(values: readonly number[], low: number, high: number): string {
  const factor = 4095 / (high - low);
  let text = '';
  for (const value of values) text += pairs[Math.max(0, Math.min(4095, Math.round(factor * (value - low))))];
  return text;
}

function sizeOf(point: TracePoint): number {
  return JSON.stringify(point).length;
}
