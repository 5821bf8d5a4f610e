import { deriveAmounts, type StartAmounts } from '../amount/deriveAmounts.js';
import type { Flag } from '../base/flag.js';
import { applyAmendments } from './applyAmendments.js';
import { deriveStates } from './deriveStates.js';
import { fitKinetics } from './fitKinetics.js';
import { flagSeries } from './flagSeries.js';
import { forecastTarget } from './forecastTarget.js';
import { mergeUnassigned } from './mergeUnassigned.js';
import { type OrderedPoint, orderPoints } from './orderPoints.js';
import type { Series, SeriesPoint } from './series.js';
import type { SeriesInputs } from './seriesInputs.js';
import { splitDuplicates } from './splitDuplicates.js';

/**
 * From the set of point records to the series: the table of contents of a run.
 *
 * A pure function of the set: the order of `points` and `inputs` does not matter, and nothing of when a file arrived enters.
 *
 * @param inputs records, run file, amendments
 * @returns points by acquisition time, with amounts, conversion, kinetics, forecast and states
 */
export function deriveSeries(inputs: SeriesInputs): Series {
  const { method, runFile } = inputs;
  const { kept, duplicates } = splitDuplicates(inputs.points);
  const ordered = orderPoints(kept, runFile);
  const judged = applyAmendments(ordered, inputs.amendments);
  const start = startAmounts(judged, inputs);
  const measured = judged.map((point) => withAmounts(point, inputs, start));
  const points = flagSeries(measured, method);
  const kinetics = fitKinetics(points, method);
  const forecast = forecastTarget(points, method, kinetics);
  const purity = purityOf(points);
  return {
    run: inputs.run,
    method: { title: method.title, version: method.version, sha256: method.sha256 },
    points,
    inputs: [...inputs.inputs, ...duplicates].sort((a, b) => compare(a.file, b.file) || compare(a.sha256 ?? '', b.sha256 ?? '')),
    ...(kinetics ? { kinetics } : {}),
    ...(forecast ? { forecast } : {}),
    ...(purity ? { purity } : {}),
    unassignedLines: mergeUnassigned(points, method),
    states: deriveStates(points, method, runFile),
    flags: seriesFlags(points),
  };
}

type Judged = Omit<SeriesPoint, 'amounts'>;

function withAmounts(point: Judged, { method, runFile }: SeriesInputs, start: StartAmounts | undefined): SeriesPoint {
  const { measurement } = point.record;
  if (!measurement || point.status === 'set-aside') return point;
  const amounts = deriveAmounts(measurement, method, runFile, start);
  const heavy = amounts.flags.some(({ weight }) => weight !== 'note');
  return { ...point, amounts, flags: [...point.flags, ...amounts.flags], status: heavy ? 'flagged' : point.status };
}

/** Moles at time zero: what the first usable point holds of the starting material and of all that came of it. */
function startAmounts(points: readonly Judged[], { method, runFile }: SeriesInputs): StartAmounts | undefined {
  const first = points.find(({ status, record }) => status !== 'set-aside' && record.measurement);
  const { conversion } = method;
  if (!first?.record.measurement || !conversion) return undefined;
  const amounts = deriveAmounts(first.record.measurement, method, runFile);
  if (amounts.unit === 'relative') return undefined;
  const of = amounts.species[conversion.of];
  if (!of) return undefined;
  const formed = method.species.filter(({ id, role }) =>
    conversion.to !== undefined ? id === conversion.to : role === 'product' || role === 'intermediate',
  );
  let [value, variance] = [of.amount, of.u ** 2];
  for (const { id, stoichiometry } of formed) {
    const amount = amounts.species[id];
    if (!amount) continue;
    value += amount.amount / stoichiometry;
    variance += (amount.u / stoichiometry) ** 2;
  }
  return { unit: amounts.unit, amount: { value, u: Math.sqrt(variance) } };
}

function purityOf(points: readonly SeriesPoint[]): Series['purity'] {
  const last = points.findLast(({ status, amounts }) => status !== 'set-aside' && amounts?.purity !== undefined);
  const budget = last?.amounts?.purity;
  return budget ? { massFraction: budget.result.value, u: budget.result.u, replicates: 1, budget } : undefined;
}

function seriesFlags(points: readonly SeriesPoint[]): Flag[] {
  if (points.length === 0) return [{ code: 'no-points', message: 'no time point could be read yet' }];
  return points.every(({ status }) => status === 'set-aside')
    ? [{ code: 'no-usable-points', message: 'every time point is set aside' }]
    : [];
}

/** By code units: the same on every machine. */
export function compare(a: string, b: string): number {
  return a < b ? -1 : a > b ? 1 : 0;
}

export type { OrderedPoint };
