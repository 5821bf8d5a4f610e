import type { SeriesInput } from './series.js';
import type { SeriesInputs } from './seriesInputs.js';

/**
 * Of several files with the same bytes the first by name is the time point; the others are duplicates (contract section 6).
 *
 * @returns the kept points and one input per duplicate file, whatever order they came in
 */
export function splitDuplicates(points: SeriesInputs['points']): { kept: SeriesInputs['points']; duplicates: SeriesInput[] } {
  const firstName = new Map<string, string>();
  for (const { file, record } of points) {
    const known = firstName.get(record.sha256);
    if (known === undefined || file < known) firstName.set(record.sha256, file);
  }
  const kept = points.filter(({ file, record }) => firstName.get(record.sha256) === file);
  const others = new Map<string, SeriesInput>();
  for (const { file, record } of points) {
    const first = firstName.get(record.sha256)!;
    if (first === file) continue;
    const flags = [{ code: 'duplicate', message: `the same bytes as ${first}` }];
    others.set(file, { file, sha256: record.sha256, status: 'duplicate', flags });
  }
  return { kept, duplicates: [...others.values()] };
}
