import type { Flag } from '../base/flag.js';
import type { Method } from '../method/method.js';
import type { Expectation } from './expectations.js';
import { type PinnedReference, type PlacedAxis, pinReference } from './pinReference.js';

/** A reference lies this near to where the other lines put it; water moves with temperature and acidity. */
const withinPpm = 0.05;
const waterWithinPpm = 0.12;

/**
 * Pins the axis on the method's reference, or on the next best thing that is there, named in a flag.
 *
 * @param real  shape (n), in phase and flat, high to low shift
 * @param axis  as placed
 * @param noise rms
 * @returns the reference used (undefined: none found, the axis stays as placed) and what is to be said
 */
export function chooseReference(
  real: Float64Array,
  axis: PlacedAxis,
  noise: number,
  method: Method,
  expectations: readonly Expectation[],
): { pinned?: PinnedReference; flags: readonly Flag[] } {
  const wanted = method.reference.signal;
  const named = expectations.find(({ name, kind }) => (wanted === 'solvent' ? kind === 'solvent' : name === wanted));
  const target = named && method.reference.shiftPpm !== undefined ? { ...named, shiftPpm: method.reference.shiftPpm } : named;
  const first = target
    ? pinReference(
        real,
        axis,
        noise,
        target,
        wanted === 'HDO' || (wanted === 'solvent' && method.solvent === 'D2O') ? waterWithinPpm : withinPpm,
      )
    : undefined;
  if (first) return { pinned: first, flags: first.isSplit ? [splitFlag(wanted)] : [] };
  for (const next of ranked(expectations, wanted)) {
    const pinned = pinReference(real, axis, noise, next, withinPpm);
    if (!pinned || pinned.signalToNoise < 10) continue;
    const message = `the reference ${wanted} was not found; the axis is pinned on ${next.name} at ${next.shiftPpm} ppm instead`;
    return { pinned: { ...pinned, name: next.name }, flags: [{ code: 'reference-missing', message }] };
  }
  return {
    flags: [
      {
        code: 'reference-missing',
        message: `the reference ${wanted} was not found, nor anything else to pin the axis on; shifts may be off`,
      },
    ],
  };
}

/** Next best: the solvent's residual signal, then signals of what must be in the tube, then any other signal. */
function ranked(expectations: readonly Expectation[], wanted: string): Expectation[] {
  const rank = ({ kind, sureness }: Expectation) =>
    kind === 'solvent' ? 3 : kind === 'reference' ? 2 : kind === 'signal' ? sureness : -1;
  return expectations
    .filter((expectation) => expectation.name !== wanted && rank(expectation) > 0.3)
    .sort((a, b) => rank(b) - rank(a) || b.shiftPpm - a.shiftPpm);
}

function splitFlag(name: string): Flag {
  return { code: 'reference-split', message: `the reference line ${name} shows two tops: shim, or another line beside it` };
}
