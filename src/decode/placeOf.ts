import type { Acquisition, AxisHint, ShiftReference } from './acquisition.js';
import { type Header, optionalNumber } from './headerOf.js';
import { tolerated } from './jcampProblem.js';
import type { AbscissaPlan } from './layout.js';

type Place = Pick<Acquisition, 'dwellS' | 'spectralWidthHz' | 'axis'>;

/**
 * Turns the checked abscissa into a dwell time, or into a width and an axis in ppm.
 *
 * @param points number of points found
 * @source JCAMP-DX 5.01: shift = (frequency - frequency of the reference point) / observe frequency + shift of the reference
 */
export function placeOf(
  abscissa: AbscissaPlan,
  points: number,
  observeMhz: number | undefined,
  reference: ShiftReference | undefined,
  header: Header,
): Place {
  const [first, last] = [abscissa.first.value * abscissa.scale, abscissa.last.value * abscissa.scale];
  const step = Math.abs(last - first) / (points - 1);
  if (abscissa.unit === 's') {
    const dwellS = preciseStep(abscissa, points) * abscissa.scale;
    compareAcquisitionTime(header, dwellS, points);
    return { dwellS, spectralWidthHz: 1 / dwellS };
  }
  if (abscissa.unit === 'ppm')
    return { spectralWidthHz: step * points * (observeMhz ?? 1), axis: { firstPpm: first, lastPpm: last } };
  const axis = observeMhz === undefined ? undefined : axisFromHertz(first, last, points, observeMhz, reference);
  return { spectralWidthHz: step * points, ...(axis ? { axis } : {}) };
}

/** The step of the header that is printed with most digits: FACTOR where the table counts points, else DELTA, else the span. */
function preciseStep(abscissa: AbscissaPlan, points: number): number {
  const span = Math.abs(abscissa.last.value - abscissa.first.value) / (points - 1);
  const spanRounding = (abscissa.first.rounding + abscissa.last.rounding) / (points - 1);
  const candidates = [abscissa.factor, ...(abscissa.delta ? [abscissa.delta] : [])];
  const closest = candidates.find(
    ({ value, rounding }) =>
      rounding > 0 && rounding < spanRounding && Math.abs(Math.abs(value) - span) <= spanRounding + rounding,
  );
  return closest ? Math.abs(closest.value) : span;
}

function axisFromHertz(
  first: number,
  last: number,
  points: number,
  observeMhz: number,
  reference: ShiftReference | undefined,
): AxisHint {
  const step = (last - first) / (points - 1);
  const isInside = reference !== undefined && reference.pointNumber >= 1 && reference.pointNumber <= points;
  const referenceHz = isInside ? first + step * (reference.pointNumber - 1) : 0;
  const shiftPpm = isInside ? reference.shiftPpm : 0;
  return { firstPpm: (first - referenceHz) / observeMhz + shiftPpm, lastPpm: (last - referenceHz) / observeMhz + shiftPpm };
}

function compareAcquisitionTime(header: Header, dwellS: number, points: number): void {
  const statedS = optionalNumber(header, '.ACQUISITIONTIME');
  if (statedS === undefined || Math.abs(statedS - dwellS * points) <= 2.5 * dwellS + 1e-3 * dwellS * points) return;
  const text = `.ACQUISITION TIME is ${statedS} s, but ${points} points of ${dwellS} s take ${Number((dwellS * points).toPrecision(6))} s`;
  header.flags.push(tolerated('jcamp-acquisition-time', text));
}
