import type { Spectrum } from '../spectrum/spectrum.js';
import type { Target } from './signalTargets.js';

const usualWidthHz = 1;
/** Lines lower than this over the noise have no clear half height. */
const heightMin = 15;
const widthMaxHz = 40;

/**
 * First guess of the line width: the narrowest half-height width among the tallest lines of the search windows. A multiplet's
 * tallest line may be an unresolved pair, and a reference may be broad, split or misjudged, but none is too narrow.
 *
 * @returns full width at half height, Hz; never below one and a half points
 * @source  common practice
 */
export function guessWidth(spectrum: Spectrum, targets: readonly Target[]): number {
  const least = 1.5 * spectrum.stepHz;
  const widths = targets.flatMap((target) => (target.signal.pattern.isBroad ? [] : widthOfTallest(spectrum, target)));
  if (widths.length > 0) return Math.max(Math.min(...widths), least);
  const known = spectrum.quality.referenceWidthHz ?? spectrum.reference.widthHz;
  return Math.max(known !== undefined && known > 0 && known < widthMaxHz ? known : usualWidthHz, least);
}

/** Width at half height, between points by straight lines, of the tallest point in a target's search window. */
function widthOfTallest(spectrum: Spectrum, { signal, spanHz }: Target): number[] {
  const { real, observeMhz, firstPpm, stepPpm, stepHz, noise } = spectrum;
  const reach = signal.withinPpm + Math.max(Math.abs(spanHz[0]), spanHz[1]) / observeMhz;
  const from = Math.max(1, Math.floor((firstPpm - signal.shiftPpm - reach) / stepPpm));
  const to = Math.min(real.length - 1, Math.ceil((firstPpm - signal.shiftPpm + reach) / stepPpm) + 1);
  let top = from;
  for (let i = from; i < to; i += 1) if (real[i]! > real[top]!) top = i;
  if (to <= from || real[top]! < heightMin * noise) return [];
  const left = crossing(real, top, -1);
  const right = crossing(real, top, 1);
  const widthHz = (left + right) * stepHz;
  return widthHz < widthMaxHz ? [widthHz] : [];
}

/** Points from the top to where half the height is crossed. */
function crossing(real: Float64Array, top: number, direction: 1 | -1): number {
  const half = real[top]! / 2;
  let i = top;
  while (i > 0 && i < real.length - 1 && real[i + direction]! > half) i += direction;
  const inside = real[i]!;
  const outside = real[i + direction] ?? inside;
  const part = inside > outside ? (inside - half) / (inside - outside) : 1;
  return Math.abs(i - top) + part;
}
