import type { Amounts } from '../../amount/amounts.js';
import type { SeriesPoint } from '../series.js';

/** A point that may speak for the state of a run. */
export interface UsablePoint extends SeriesPoint {
  readonly amounts: Amounts;
}

/** The points that are not set aside and carry numbers, in order. */
export function usablePoints(points: readonly SeriesPoint[]): UsablePoint[] {
  return points.filter((point): point is UsablePoint => point.status !== 'set-aside' && point.amounts !== undefined);
}
