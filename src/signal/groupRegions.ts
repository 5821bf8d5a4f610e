import type { Spectrum } from '../spectrum/spectrum.js';
import type { Located } from './locateSignals.js';
import type { Target } from './signalTargets.js';

/** Signals that are fitted together, and the points they are fitted on. */
export interface Region {
  readonly targets: readonly Target[];
  readonly from: number;
  readonly to: number;
}

/** Points up to this many line widths beside the outermost lines are fitted: the tails beyond hold 0.8 % of a Lorentzian each side. */
export const wideMargin = 20;
/** Where the shape of a line is not known to the noise, its far tails say more about the baseline than about the line. */
export const narrowMargin = 8;
/** Signals whose lines come closer than this share their tails so much that they are fitted together. */
const joinWidths = 14;

/**
 * Groups the located signals into regions: those whose lines come near each other share one fit.
 *
 * @param located places by key
 * @param widthOf      full width at half height expected for a target, Hz
 * @param marginWidths line widths fitted beside the outermost lines
 * @returns regions by descending shift; windows may overlap, the tails of one are taken off the other
 * @source  common practice
 */
export function groupRegions(
  spectrum: Spectrum,
  targets: readonly Target[],
  located: ReadonlyMap<string, Located>,
  widthOf: (target: Target) => number,
  marginWidths = wideMargin,
): Region[] {
  const { firstPpm, observeMhz, stepHz, real } = spectrum;
  const spans = targets
    .flatMap((target) => {
      const place = located.get(target.key);
      if (place === undefined) return [];
      const widthHz = widthOf(target);
      return {
        target,
        widthHz,
        high: place.shiftHz + target.spanHz[1],
        low: place.shiftHz + target.spanHz[0],
      };
    })
    .sort((a, b) => b.high - a.high || (a.target.key < b.target.key ? -1 : 1));
  const groups: { spans: typeof spans; low: number; widthHz: number }[] = [];
  for (const span of spans) {
    const last = groups.at(-1);
    if (last !== undefined && last.low - span.high < (joinWidths / 2) * (last.widthHz + span.widthHz)) {
      last.spans.push(span);
      last.low = Math.min(last.low, span.low);
      last.widthHz = Math.max(last.widthHz, span.widthHz);
    } else groups.push({ spans: [span], low: span.low, widthHz: span.widthHz });
  }
  const toIndex = (hz: number) => (firstPpm * observeMhz - hz) / stepHz;
  return groups.map((group) => {
    const high = Math.max(...group.spans.map((span) => span.high + marginWidths * span.widthHz));
    const low = Math.min(...group.spans.map((span) => span.low - marginWidths * span.widthHz));
    const from = Math.min(real.length - 3, Math.max(0, Math.floor(toIndex(high))));
    const to = Math.max(from + 3, Math.min(real.length, Math.ceil(toIndex(low)) + 1));
    return { targets: group.spans.map((span) => span.target), from, to };
  });
}
