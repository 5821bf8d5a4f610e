import type { Flag } from '../base/flag.js';
import { ok, type Result } from '../base/result.js';
import { refuse, tolerated } from './jcampProblem.js';
import type { AbscissaPlan } from './layout.js';
import type { LineStart, TableState } from './tableState.js';

/**
 * Part of a step by which an abscissa may be off beyond its printed rounding. Writers that add up steps in single precision drift by
 * a third of a step (seen in public test files); a lost line moves it by whole steps.
 */
const slackSteps = 0.5;

/**
 * Holds the abscissa at the start of every table line against the point that starts there (the X-sequence check).
 *
 * Two ways to print abscissae are understood: positions divided by the factor, as the standard asks, and mere counts of the points
 * (seen in the field; noted).
 *
 * @param plan abscissa of the header, whose FIRST and LAST belong to points 0 and `state.count - 1`
 * @returns flags
 * @errors jcamp-axis, jcamp-abscissa
 * @source JCAMP-DX 4.24, section 5.8 (X-sequence check)
 */
export function checkAbscissa(state: TableState, plan: AbscissaPlan): Result<Flag[]> {
  const intervals = state.count - 1;
  const spanValue = plan.last.value - plan.first.value;
  const step = spanValue / intervals;
  const factor = plan.factor.value;
  if (spanValue === 0 || factor === 0)
    return refuse('jcamp-axis', `the abscissa runs from ${plan.first.value} to ${plan.last.value} by factor ${factor}: no axis`);
  if (plan.unit === 's' && step < 0)
    return refuse('jcamp-axis', `time runs backwards, from ${plan.first.value} to ${plan.last.value}`, { label: 'LAST' });
  const delta = checkDelta(plan, step);
  if (!delta.ok) return delta;
  const spacing = checkFactor(plan, step, intervals);
  if (!spacing.ok) return spacing;
  const common = [...delta.value, ...spacing.value, ...extremesFlag(plan)];
  const wrong = firstMisplaced(state, plan, step);
  if (!wrong) return ok([...common, ...beginFlag(state, plan, step), ...coarseFlag(state, step / factor)]);
  if (onlyCounts(state, plan, step))
    return ok([
      ...common,
      tolerated(
        'jcamp-abscissa-counts',
        'the abscissae of the table count the points; positions are taken from its first and last point',
      ),
    ]);
  const expected = (plan.first.value + step * wrong.pointIndex) / factor;
  return refuse(
    'jcamp-abscissa',
    `line ${wrong.line} starts at abscissa ${wrong.abscissa}; its first point is number ${wrong.pointIndex + 1}, at ${Number(expected.toPrecision(9))}: a line before it is missing, doubled or damaged`,
    { line: wrong.line },
  );
}

function firstMisplaced(state: TableState, plan: AbscissaPlan, step: number): LineStart | undefined {
  const factor = plan.factor.value;
  const relative = Math.min(1e-5, plan.factor.rounding / Math.abs(factor)) + 1e-9;
  const oneStep = Math.abs(step / factor);
  return state.lineStarts.find(({ abscissa, pointIndex, rounding }) => {
    const expected = (plan.first.value + step * pointIndex) / factor;
    const whole = rounding + slackSteps * oneStep + relative * Math.abs(expected);
    const allowed = rounding < oneStep ? Math.min(whole, 0.9 * oneStep) : whole;
    return !(Math.abs(abscissa - expected) <= allowed);
  });
}

/** Counts 0, 1, 2 ... (or from 1) in the order of the points, or downwards to 0 or 1 where the header descends too. */
function onlyCounts(state: TableState, plan: AbscissaPlan, step: number): boolean {
  if (Math.abs(Math.abs(step / plan.factor.value) - 1) > 1e-4 && plan.factor.value !== 1) return false;
  const start = state.lineStarts[0]!.abscissa;
  const isUpward = start === 0 || start === 1;
  const isDownward = step < 0 && (start === state.count - 1 || start === state.count);
  if (!isUpward && !isDownward) return false;
  const sign = isUpward ? 1 : -1;
  return state.lineStarts.every(({ abscissa, pointIndex }) => abscissa === start + sign * pointIndex);
}

function checkDelta({ delta }: AbscissaPlan, step: number): Result<Flag[]> {
  if (!delta) return ok([]);
  const slack = 2 * delta.rounding + 1e-5 * Math.abs(step);
  if (!(Math.abs(Math.abs(delta.value) - Math.abs(step)) <= slack))
    return refuse(
      'jcamp-axis',
      `DELTAX is ${delta.value}, but FIRST, LAST and the number of points give a step of ${Number(step.toPrecision(9))}`,
      { label: 'DELTAX' },
    );
  if (Math.sign(delta.value) === Math.sign(step)) return ok([]);
  return ok([
    tolerated('jcamp-delta-sign', `DELTAX is ${delta.value}, but the abscissa runs the other way from first to last point`),
  ]);
}

/** A factor that is the step, as in tables that count points, must be the step that FIRST and LAST give. */
function checkFactor(plan: AbscissaPlan, step: number, intervals: number): Result<Flag[]> {
  const factor = Math.abs(plan.factor.value);
  const off = Math.abs(factor - Math.abs(step));
  const ends = (plan.first.rounding + plan.last.rounding) / intervals;
  if (off <= 1.001 * ends + 1e-6 * factor || off > 0.05 * factor) return ok([]);
  const text = `the factor of the abscissa is ${factor}, but FIRST and LAST give a step of ${Number(step.toPrecision(9))}, which is used`;
  if (off <= 1.001 * (ends + plan.factor.rounding)) return ok([tolerated('jcamp-step-rounded', text)]);
  return refuse(
    'jcamp-axis',
    `the factor of the abscissa is ${factor}, but FIRST, LAST and the number of points give a step of ${Number(step.toPrecision(9))}`,
    { label: 'FACTOR' },
  );
}

/** FIRST is printed for the very point that the first line starts with: no drift can excuse a difference. */
function beginFlag(state: TableState, plan: AbscissaPlan, step: number): Flag[] {
  const { abscissa, rounding } = state.lineStarts[0]!;
  const factor = Math.abs(plan.factor.value);
  const expected = plan.first.value / plan.factor.value;
  const relative = Math.min(1e-5, plan.factor.rounding / factor) + 1e-9;
  const allowed = rounding + plan.first.rounding / factor + relative * Math.abs(expected) + 0.05 * Math.abs(step / factor);
  if (Math.abs(abscissa - expected) <= allowed) return [];
  const text = `the table starts at abscissa ${abscissa}, FIRST says ${Number(expected.toPrecision(9))}, which is used`;
  return [tolerated('jcamp-first-abscissa', text)];
}

/** MIN and MAX of the abscissa are its ends; FIRST and LAST are the ones that the table bears out. */
function extremesFlag({ first, last, min, max }: AbscissaPlan): Flag[] {
  const [low, high] = first.value < last.value ? [first, last] : [last, first];
  const differs = (stated: AbscissaPlan['min'], end: AbscissaPlan['first']) =>
    stated !== undefined && Math.abs(stated.value - end.value) > (stated.roundingLoose + end.roundingLoose) * 1.001;
  if (!differs(min, low) && !differs(max, high)) return [];
  const text = `MIN and MAX of the abscissa are not its ends ${low.value} and ${high.value}; FIRST and LAST are used`;
  return [tolerated('jcamp-extremes-header', text)];
}

function coarseFlag(state: TableState, stepCount: number): Flag[] {
  const coarsest = state.lineStarts.reduce((widest, { rounding }) => Math.max(widest, rounding), 0);
  if (coarsest < Math.abs(stepCount)) return [];
  return [
    tolerated(
      'jcamp-abscissa-coarse',
      'abscissae in the table are printed too coarsely to show a lost line; the number of points and the check ordinates do',
    ),
  ];
}
