import type { Method } from '../method/method.js';
import type { SeriesPoint } from './series.js';

/** One sight of a line that no species explains. */
export interface Sight {
  /** Index into the points handed over. */
  readonly index: number;
  readonly shiftPpm: number;
  readonly area: number;
  /** Area over that of all starting materials, intermediates, products and impurities of the point, and its u. */
  readonly share: number;
  readonly shareU: number;
  readonly pattern: string;
  readonly suggestion?: string;
}

/** One unassigned line through time. */
export type Track = readonly Sight[];

const samePpm = 0.012;

/**
 * Follows unassigned lines from point to point: a line belongs to the track whose last sight lies nearest within 0.012 ppm.
 *
 * Looks only backwards, so the tracks of the first points do not change when later ones come.
 *
 * @param points by time, without those set aside
 * @returns tracks in the order in which they were first seen; at most one sight a point
 */
export function trackUnassigned(points: readonly SeriesPoint[], method?: Method): Track[] {
  const tracks: Sight[][] = [];
  points.forEach(({ record: { measurement } }, index) => {
    if (!measurement) return;
    const known = knownArea(measurement, method);
    const lines = [...measurement.unassigned].sort((a, b) => b.area - a.area || b.shiftPpm - a.shiftPpm);
    for (const { shiftPpm, area, u, pattern, suggestion } of lines) {
      const sight: Sight = {
        index,
        shiftPpm,
        area,
        share: known > 0 ? area / known : 0,
        shareU: known > 0 ? u / known : 0,
        pattern,
        ...(suggestion !== undefined ? { suggestion } : {}),
      };
      const track = nearest(tracks, shiftPpm);
      if (!track) tracks.push([sight]);
      // A second line of the same point within reach is the lesser one, and part of what the first was merged from.
      else if (track.at(-1)!.index !== index) track.push(sight);
    }
  });
  return tracks;
}

function nearest(tracks: readonly Sight[][], shiftPpm: number): Sight[] | undefined {
  let best: Sight[] | undefined;
  let least = samePpm;
  for (const track of tracks) {
    const off = Math.abs(track.at(-1)!.shiftPpm - shiftPpm);
    if (off < least) [best, least] = [track, off];
  }
  return best;
}

const counted: ReadonlySet<string> = new Set(['starting-material', 'intermediate', 'product', 'by-product', 'impurity']);

function knownArea({ signals }: NonNullable<SeriesPoint['record']['measurement']>, method: Method | undefined): number {
  const roles = new Map(method?.species.map(({ id, role }) => [id, role]));
  const isCounted = (species: string) => method === undefined || counted.has(roles.get(species) ?? '');
  return signals
    .filter(({ species }) => isCounted(species))
    .reduce((sum, { area }) => sum + (Number.isFinite(area) ? Math.max(0, area) : 0), 0);
}
