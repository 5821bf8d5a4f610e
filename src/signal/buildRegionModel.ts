import { type LineComponent, withComponents } from './lineComponents.js';
import type { Located } from './locateSignals.js';
import type { Parameter, RegionModel, Term } from './regionModel.js';
import { reachPpm, type Target } from './signalTargets.js';

/** The line shape that the lines of one spectrum share. */
export interface SharedShape {
  readonly widthHz: number;
  readonly components: readonly LineComponent[];
  /** Relative misfit that the best shape still leaves on strong lines. */
  readonly misfit: number;
  /** Standard deviation of the log width from line to line. */
  readonly logWidthSigma: number;
  readonly lorentzShare: number;
  /** Standard uncertainty; 0 holds the share. */
  readonly lorentzShareU: number;
  /** Angle of the dispersive share, radians. */
  readonly phase: number;
  readonly phaseSigma: number;
}

/** Listed couplings are rounded to 0.1 Hz and read from spectra of some other day. */
const couplingSigmaHz = 0.12;
const couplingReachHz = 0.6;
/** Relaxation and unresolved couplings make lines of one spectrum differ by some percent. */
const ownWidthSigma = 0.06;
const broadFactor = 8;
const broadSigma = 1;

/**
 * Sets up the terms and parameters of one region: common width, phase and shape, a shift per signal, couplings on a short lead.
 *
 * @param observeMhz turns the search limits into Hz
 * @returns one term per target, in the same order
 * @source  own; the priors are common practice
 */
export function buildRegionModel(
  targets: readonly Target[],
  located: ReadonlyMap<string, Located>,
  shape: SharedShape,
  observeMhz: number,
): RegionModel {
  const parameters: Parameter[] = [];
  const add = (kind: Parameter['kind'], mean: number, sigma: number, low: number, high: number, start = mean) =>
    parameters.push({ kind, start, mean, sigma, low, high }) - 1;
  const lorentzShare = add('lorentz-share', shape.lorentzShare, shape.lorentzShareU, 0, 1);
  const phase = add('phase', shape.phase, shape.phaseSigma, -0.6, 0.6);
  const logWidth = Math.log(shape.widthHz);
  const common = add('log-width', logWidth, shape.logWidthSigma, logWidth - 1.6, logWidth + 2.3);
  const sharps = targets.filter((target) => !target.signal.pattern.isBroad).length;
  const terms = targets.map((target): Term => {
    const { shiftHz, isPresent } = located.get(target.key)!;
    const { shiftPpm, pattern } = target.signal;
    const centre = shiftPpm * observeMhz;
    const reach = reachPpm(target.signal) * observeMhz;
    const shift = add('shift', centre, isPresent ? reach : 0, centre - reach, centre + reach, shiftHz);
    const widths = [common];
    if (pattern.isBroad) widths.push(add('log-width', Math.log(broadFactor), isPresent ? broadSigma : 0, 0, 5));
    else if (sharps > 1 && isPresent) widths.push(add('log-width', 0, ownWidthSigma, -0.5, 1));
    const couplings = target.couplingsHz.map(() =>
      add('coupling', 0, isPresent ? couplingSigmaHz : 0, -couplingReachHz, couplingReachHz),
    );
    const hasCouplings = target.lines.every((line) => line.perCoupling.length === couplings.length);
    return {
      key: target.key,
      lines: withComponents(target.lines, shape.components),
      shift,
      widths,
      phase,
      couplings: hasCouplings ? couplings : [],
    };
  });
  return { terms, parameters, lorentzShare, components: shape.components };
}
