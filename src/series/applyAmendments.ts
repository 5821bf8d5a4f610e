import type { Flag } from '../base/flag.js';
import { statusOf } from '../point/statusOf.js';
import type { OrderedPoint } from './orderPoints.js';
import type { Amendment } from './seriesInputs.js';

/**
 * Applies signed-off changes in the order in which they were entered: the last word on a point holds.
 *
 * A point that the program itself could not measure stays set aside whatever is restored.
 */
export function applyAmendments(points: readonly OrderedPoint[], amendments: readonly Amendment[]): OrderedPoint[] {
  return points.map((point) => {
    const own = amendments.filter(
      (amendment) => amendment.point === point.sha256 && (amendment.block === undefined || amendment.block === point.block),
    );
    if (own.length === 0) return point;
    const decisive = own.findLast(({ kind }) => kind !== 'comment');
    const notes: Flag[] = own.map(({ kind, by, because }) => ({
      code: `amended-${kind}`,
      message: `${by}: ${because}`,
      weight: kind === 'set-aside' ? 'flag' : 'note',
    }));
    const flags = [...point.flags, ...notes];
    if (decisive?.kind === 'set-aside') return { ...point, flags, status: 'set-aside' };
    if (point.status === 'set-aside' || point.record.status === 'set-aside') return { ...point, flags };
    return { ...point, flags, status: statusOf(point.flags) };
  });
}
