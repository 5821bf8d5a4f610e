import type { Series, SeriesPoint } from './series.js';

const samePpm = 0.012;

/**
 * Merges the unassigned signals of all points into lines that grow, fade or stay.
 *
 * @returns one entry per line seen in at least two points, high to low shift; areas by point, null where it was not seen
 */
export function mergeUnassigned(points: readonly SeriesPoint[]): NonNullable<Series['unassignedLines']> {
  const usable = points.filter(({ status }) => status !== 'set-aside');
  const seen = usable.flatMap(({ record }, index) => (record.measurement?.unassigned ?? []).map((line) => ({ ...line, index })));
  seen.sort((a, b) => b.shiftPpm - a.shiftPpm || a.index - b.index);
  const groups: (typeof seen)[] = [];
  for (const line of seen) {
    const group = groups.at(-1);
    if (group && group[0]!.shiftPpm - line.shiftPpm < samePpm * 2 && Math.abs(group.at(-1)!.shiftPpm - line.shiftPpm) < samePpm)
      group.push(line);
    else groups.push([line]);
  }
  return groups
    .filter((group) => new Set(group.map(({ index }) => index)).size >= 2)
    .map((group) => describe(group, usable.length));
}

type SeenLine = NonNullable<SeriesPoint['record']['measurement']>['unassigned'][number] & { readonly index: number };

function describe(group: readonly SeenLine[], pointCount: number): NonNullable<Series['unassignedLines']>[number] {
  const areas: (number | null)[] = Array.from({ length: pointCount }, () => null);
  for (const { index, area } of group) areas[index] = Math.max(areas[index] ?? 0, area);
  const shiftPpm = group.reduce((sum, line) => sum + line.shiftPpm, 0) / group.length;
  const trend = trendOf(areas);
  const last = group.reduce((latest, line) => (line.index > latest.index ? line : latest));
  const suggestion = last.suggestion !== undefined ? `; ${last.suggestion} lies there` : '';
  const verb = { grows: 'grows', fades: 'fades', steady: 'stays' }[trend];
  return {
    shiftPpm,
    trend,
    areas,
    words: `${last.pattern} at ${shiftPpm.toFixed(3)} ppm ${verb} (seen in ${areas.filter((area) => area !== null).length} of ${pointCount} points)${suggestion}`,
  };
}

/** The later half of the points against the earlier half; unseen counts as zero. */
function trendOf(areas: readonly (number | null)[]): 'grows' | 'fades' | 'steady' {
  const half = Math.floor(areas.length / 2);
  const mean = (part: readonly (number | null)[]) =>
    part.reduce<number>((sum, area) => sum + (area ?? 0), 0) / Math.max(1, part.length);
  const [early, late] = [mean(areas.slice(0, half)), mean(areas.slice(areas.length - half))];
  if (late > 1.3 * early) return 'grows';
  return early > 1.3 * late ? 'fades' : 'steady';
}
