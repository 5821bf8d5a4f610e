import type { Flag } from '../base/flag.js';
import { ok, type Result } from '../base/result.js';
import { refuse, tolerated } from './jcampProblem.js';
import type { AbscissaPlan, TablePlan } from './layout.js';
import type { TableState } from './tableState.js';

/**
 * Holds the number of points in the table against the number stated.
 *
 * A statement that is off by one is tolerated when DELTAX says so too: FIRST + (n - 1) DELTA = LAST holds for the points found, and
 * not for the points stated. A table that lost a point fails this, because its header still agrees with itself.
 *
 * @errors jcamp-point-count
 */
export function checkCount(state: TableState, plan: TablePlan, abscissa: AbscissaPlan): Result<Flag[]> {
  const { count } = state;
  const { pointsStated, record } = plan;
  if (count === pointsStated) return ok([]);
  const steps = abscissa.delta ? Math.abs((abscissa.last.value - abscissa.first.value) / abscissa.delta.value) : Number.NaN;
  if (Math.abs(count - pointsStated) === 1 && Math.abs(steps + 1 - count) < 0.2)
    return ok([
      tolerated(
        'jcamp-point-count-header',
        `the header states ${pointsStated} points, the table holds ${count}, as first and last abscissa and DELTAX say`,
      ),
    ]);
  return refuse(
    'jcamp-point-count',
    `the table at line ${record.line} holds ${count} points; the header states ${pointsStated}: part of it is missing or damaged`,
    { line: record.line, label: record.writtenLabel },
  );
}
