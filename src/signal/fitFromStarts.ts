import { fitRegion } from './fitRegion.js';
import type { Parameter, RegionFit, RegionModel, RegionWindow } from './regionModel.js';

/** Chi-square per point above which a fit of several signals may have confused them. */
const doubtfulChiSquare = 1.15;
const swapsMax = 6;

/**
 * Fits a region from more than one start where signals may have been taken for each other: as located, with two signals
 * exchanged, and from the listed shifts. The lowest cost wins; the prior on each shift decides between equal patterns.
 *
 * @source  multi-start (common practice)
 */
export function fitFromStarts(window: RegionWindow, model: RegionModel): RegionFit {
  let best = fitRegion(window, model);
  if (model.terms.length < 2) return best;
  const consider = (
    starts: ReadonlyMap<number, number>,
    marginOf: (trial: RegionFit, best: RegionFit) => number = () => 1e-3,
  ) => {
    const parameters = model.parameters.map(
      (parameter, k): Parameter => ({
        ...parameter,
        start: starts.get(k) ?? (parameter.kind === 'shift' ? best.values[k]! : parameter.start),
      }),
    );
    const trial = fitRegion(window, { ...model, parameters });
    if (trial.cost < best.cost - marginOf(trial, best)) best = trial;
  };
  for (const [a, b] of exchangeable(model, best).slice(0, swapsMax)) {
    consider(
      new Map([
        [a, best.values[b]!],
        [b, best.values[a]!],
      ]),
      exchangeMargin,
    );
  }
  if (best.chiSquare > doubtfulChiSquare * best.whitened.length) {
    const shifts = model.terms.map(({ shift }) => shift);
    consider(new Map(shifts.map((shift) => [shift, model.parameters[shift]!.mean])));
    for (const shift of shifts) consider(new Map([[shift, model.parameters[shift]!.mean]]));
  }
  return best;
}

/** Evidence that an exchange of two signals against their listed order must bring, in units of cost. */
const decisive = 25;

/** Two signals of nearly the same pattern fit either way: the arrangement nearer to the listed shifts stands unless the data insist. */
function exchangeMargin(trial: RegionFit, best: RegionFit): number {
  const [away, awayNow] = [awayFromListed(trial), awayFromListed(best)];
  if (away > awayNow * 1.2) return decisive;
  return away < awayNow / 1.2 ? -decisive : 1e-3;
}

function awayFromListed({ model, values }: RegionFit): number {
  return model.parameters.reduce(
    (sum, { kind, mean, low, high }, k) =>
      kind === 'shift' && high > low ? sum + ((values[k]! - mean) / (high - low)) ** 2 : sum,
    0,
  );
}

/** Pairs of shifts, each of which may stand where the other was found. */
function exchangeable(model: RegionModel, fit: RegionFit): [number, number][] {
  const shifts = model.terms.map(({ shift }) => shift).filter((shift) => model.parameters[shift]!.sigma > 0);
  const fits = (shift: number, value: number) => value > model.parameters[shift]!.low && value < model.parameters[shift]!.high;
  return shifts.flatMap((a, i) =>
    shifts.slice(i + 1).flatMap((b): [number, number][] => (fits(a, fit.values[b]!) && fits(b, fit.values[a]!) ? [[a, b]] : [])),
  );
}
