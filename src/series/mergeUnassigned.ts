import type { Method } from '../method/method.js';
import type { Series, SeriesPoint } from './series.js';
import { type Track, trackUnassigned } from './trackUnassigned.js';

/** A trend is more than a change by this factor, and more than three standard uncertainties. */
const trendFactor = 1.3;

/**
 * Merges the unassigned signals of all points into lines that grow, fade or stay.
 *
 * @returns one entry per line seen in at least two points, high to low shift; areas by usable point, null where it was not seen
 */
export function mergeUnassigned(points: readonly SeriesPoint[], method?: Method): NonNullable<Series['unassignedLines']> {
  const usable = points.filter(({ status }) => status !== 'set-aside');
  return trackUnassigned(usable, method)
    .filter((track) => track.length >= 2)
    .map((track) => describe(track, usable.length))
    .sort((a, b) => b.shiftPpm - a.shiftPpm);
}

function describe(track: Track, pointCount: number): NonNullable<Series['unassignedLines']>[number] {
  const areas: (number | null)[] = Array.from({ length: pointCount }, () => null);
  for (const { index, area } of track) areas[index] = area;
  const shiftPpm = track.reduce((sum, sight) => sum + sight.shiftPpm, 0) / track.length;
  const trend = trendOf(track, pointCount);
  const last = track.at(-1)!;
  const suggestion = last.suggestion !== undefined ? `; ${last.suggestion} lies there` : '';
  const verb = { grows: 'grows', fades: 'fades', steady: 'stays' }[trend];
  return {
    shiftPpm,
    trend,
    areas,
    words: `${last.pattern} at ${shiftPpm.toFixed(3)} ppm ${verb} (seen in ${track.length} of ${pointCount} points)${suggestion}`,
  };
}

/** The later half of the points against the earlier half, as shares of the known area; unseen counts as zero. */
function trendOf(track: Track, pointCount: number): 'grows' | 'fades' | 'steady' {
  const half = Math.floor(pointCount / 2);
  const mean = (from: number, to: number) => {
    const part = track.filter(({ index }) => index >= from && index < to);
    const count = Math.max(1, to - from);
    return {
      value: part.reduce((sum, { share }) => sum + share, 0) / count,
      variance: part.reduce((sum, { shareU }) => sum + shareU ** 2, 0) / count ** 2,
    };
  };
  const [early, late] = [mean(0, half), mean(pointCount - half, pointCount)];
  if (Math.abs(late.value - early.value) <= 3 * Math.sqrt(early.variance + late.variance)) return 'steady';
  if (late.value > trendFactor * early.value) return 'grows';
  return early.value > trendFactor * late.value ? 'fades' : 'steady';
}
