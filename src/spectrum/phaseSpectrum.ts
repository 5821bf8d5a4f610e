import type { Flag } from '../base/flag.js';
import type { Processing } from '../method/method.js';
import type { Raw } from './complexFrom.js';
import type { ComplexSpectrum } from './complexSpectrum.js';
import type { FoundLines } from './findLines.js';
import type { GroupFit } from './fitGroup.js';
import { type PhaseFit, wrap } from './fitPhase.js';
import { rotatePhase } from './rotatePhase.js';
import type { StepRecord } from './spectrum.js';

/** A real spectrum within this of being in phase is left as it came. */
const inPhaseRad = (6 * Math.PI) / 180;

export interface Phased {
  readonly spectrum: ComplexSpectrum;
  /** Zero order at the centre and first order from end to end, degrees. */
  readonly phaseDeg: readonly [number, number];
  readonly step: StepRecord;
  readonly flags: readonly Flag[];
}

/**
 * Turns a spectrum in both orders by what its lines show.
 *
 * @param raw      not phased; real-only input is left alone when in phase already
 * @param found    lines, their local phases and the straight line through them
 * @param phase    automatic, none, or given angles
 * @returns the phased spectrum; flag `phase-uncertain` when the groups do not lie on a line
 * @source `findLines`
 */
export function phaseSpectrum({ spectrum, isReal }: Raw, found: FoundLines, phase: Processing['phase']): Phased {
  if (phase === 'none') return done(spectrum, 0, 0, 'none', 0, []);
  if (typeof phase === 'object') return turned(spectrum, rad(phase.zeroDeg), rad(phase.firstDeg), 'given', 0, []);
  const { fit, local } = found;
  if (local.length === 0) return done(spectrum, 0, 0, 'automatic', 0, [uncertain('no line stands out enough to phase on')]);
  if (isReal && isInPhase(local)) return done(spectrum, 0, 0, 'left as it came, in phase', local.length, []);
  // A spectrum that was phased at the instrument is not turned again for a few degrees that its overlaps may well fake.
  if (isReal && Math.abs(fit.zeroRad) < inPhaseRad && Math.abs(fit.firstRad) < 8 * inPhaseRad) {
    return done(spectrum, 0, 0, 'left as it came, in phase', local.length, []);
  }
  const flags = phaseFlags(fit);
  if (isReal)
    flags.push({
      code: 'phase-from-hilbert',
      message: 'the spectrum came real and out of phase; it was phased through its Hilbert transform',
      weight: 'note',
    });
  return turned(spectrum, fit.zeroRad, fit.firstRad, 'automatic', local.length, flags);
}

const rad = (angleDeg: number) => (angleDeg * Math.PI) / 180;
const deg = (angleRad: number) => (angleRad * 180) / Math.PI;

function isInPhase(local: readonly GroupFit[]): boolean {
  const weights = local.map(({ u }) => 1 / (u * u + 1e-3));
  const total = weights.reduce((sum, value) => sum + value, 0);
  const rms = Math.sqrt(local.reduce((sum, { phaseRad }, index) => sum + weights[index]! * wrap(phaseRad) ** 2, 0) / total);
  return rms < inPhaseRad;
}

function phaseFlags(fit: PhaseFit): Flag[] {
  const restDeg = deg(fit.restRad);
  return restDeg > 8
    ? [uncertain(`the phases of ${fit.groups} groups of lines scatter by ${restDeg.toFixed(0)} degrees about a straight line`)]
    : [];
}

const uncertain = (message: string): Flag => ({ code: 'phase-uncertain', message });

function turned(
  spectrum: ComplexSpectrum,
  zeroRad: number,
  firstRad: number,
  how: string,
  groups: number,
  flags: readonly Flag[],
): Phased {
  return done(rotatePhase(spectrum, zeroRad, firstRad), deg(zeroRad), deg(firstRad), how, groups, flags);
}

function done(
  spectrum: ComplexSpectrum,
  zeroDeg: number,
  firstDeg: number,
  how: string,
  groups: number,
  flags: readonly Flag[],
): Phased {
  const step = { step: 'phase', parameters: { how, zero_deg: zeroDeg, first_deg: firstDeg, groups } };
  return { spectrum, phaseDeg: [zeroDeg, firstDeg], step, flags };
}
