import type { Flag } from '../base/flag.js';
import type { Method } from '../method/method.js';
import type { SeriesPoint } from './series.js';

/** A pause this many times the usual interval is a gap. */
const gapFactor = 1.8;

/**
 * What only the neighbours can tell of a point: a gap before it, the same data under another header, a conversion that does not fit
 * between its neighbours.
 *
 * @returns points in the same order with flags added; an outlying point is flagged, never dropped
 */
export function flagSeries(points: readonly SeriesPoint[], method: Method): SeriesPoint[] {
  const usualS = method.acquisition.intervalS ?? usualInterval(points);
  const outlying = outlyingPoints(points);
  return points.map((point, index) => {
    const flags: Flag[] = [];
    const before = points[index - 1];
    const pauseS = before ? point.elapsedS - before.elapsedS : 0;
    if (usualS !== undefined && pauseS > gapFactor * usualS) {
      flags.push({
        code: 'gap',
        message: `${(pauseS / 60).toFixed(0)} min since the point before, where ${(usualS / 60).toFixed(0)} min are usual`,
        weight: 'note',
      });
    }
    const twin = points.find(
      (other) => other !== point && other.record.dataSha256 !== '' && other.record.dataSha256 === point.record.dataSha256,
    );
    if (twin) flags.push({ code: 'same-data', message: `the same data as ${twin.file} under another header` });
    if (outlying.has(index))
      flags.push({ code: 'outlying', message: 'the conversion does not fit between those of the neighbouring points' });
    if (flags.length === 0) return point;
    const raised = flags.some(({ weight }) => weight !== 'note');
    return {
      ...point,
      flags: [...point.flags, ...flags],
      status: point.status === 'accepted' && raised ? 'flagged' : point.status,
    };
  });
}

function usualInterval(points: readonly SeriesPoint[]): number | undefined {
  const pauses = points.slice(1).map((point, index) => point.elapsedS - points[index]!.elapsedS);
  const sorted = pauses.filter((pause) => pause > 0).sort((a, b) => a - b);
  return sorted.length >= 3 ? sorted[Math.floor(sorted.length / 2)] : undefined;
}

/**
 * Points that lie off the line through their two neighbours on either side by more than 6 robust standard deviations and 6 u.
 *
 * @source Hampel, J. Am. Stat. Assoc. 1974, 69, 383 (median absolute deviation)
 */
function outlyingPoints(points: readonly SeriesPoint[]): Set<number> {
  let used = points.flatMap(({ elapsedS, amounts, status }, index) =>
    amounts?.conversion && status !== 'set-aside' ? [{ index, t: elapsedS, ...amounts.conversion }] : [],
  );
  const outlying = new Set<number>();
  // One at a time, the worst first: an outlier also spoils what its neighbours expect.
  for (let worst = worstOff(used); worst !== undefined; worst = worstOff(used)) {
    outlying.add(worst);
    used = used.filter(({ index }) => index !== worst);
  }
  return outlying;
}

function worstOff(used: readonly { index: number; t: number; value: number; u: number }[]): number | undefined {
  const offs = used.flatMap((point, k) => {
    const [left2, left, right, right2] = [used[k - 2], used[k - 1], used[k + 1], used[k + 2]];
    if (!left || !right || !left2 || !right2) return [];
    return [{ index: point.index, off: Math.abs(point.value - cubicAt(point.t, [left2, left, right, right2])), u: point.u }];
  });
  if (offs.length < 5) return undefined;
  const sizes = offs.map(({ off }) => off).sort((a, b) => a - b);
  const spread = 1.4826 * sizes[Math.floor(sizes.length / 2)]!;
  const worst = offs.reduce((top, entry) => (entry.off > top.off ? entry : top));
  return worst.off > 6 * Math.max(spread, worst.u) && worst.off > 0.01 ? worst.index : undefined;
}

/** Lagrange interpolation through four points. */
function cubicAt(t: number, nodes: readonly { t: number; value: number }[]): number {
  let sum = 0;
  nodes.forEach((node, i) => {
    let term = node.value;
    nodes.forEach((other, j) => {
      if (i !== j && node.t !== other.t) term *= (t - other.t) / (node.t - other.t);
    });
    sum += term;
  });
  return sum;
}
