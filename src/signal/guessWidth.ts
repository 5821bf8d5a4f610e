import type { Spectrum } from '../spectrum/spectrum.js';
import type { Target } from './signalTargets.js';

const usualWidthHz = 1;

/**
 * First guess of the line width: of the reference line when known, else of the tallest line in any search window at half height.
 *
 * @returns full width at half height, Hz; never below one and a half points
 * @source  common practice
 */
export function guessWidth(spectrum: Spectrum, targets: readonly Target[]): number {
  const known = spectrum.quality.referenceWidthHz ?? spectrum.reference.widthHz;
  const least = 1.5 * spectrum.stepHz;
  if (known !== undefined && known > 0) return Math.max(known, least);
  const { real, observeMhz, firstPpm, stepPpm, stepHz, noise } = spectrum;
  let top = -1;
  for (const { signal, lines } of targets) {
    const spread = (lines[0]?.offsetHz ?? 0) / observeMhz;
    const from = Math.max(0, Math.floor((firstPpm - signal.shiftPpm - signal.withinPpm - spread) / stepPpm));
    const to = Math.min(real.length, Math.ceil((firstPpm - signal.shiftPpm + signal.withinPpm + spread) / stepPpm) + 1);
    for (let i = from; i < to; i += 1) if (top < 0 || real[i]! > real[top]!) top = i;
  }
  if (top < 0 || real[top]! < 8 * noise) return Math.max(usualWidthHz, least);
  const half = real[top]! / 2;
  let left = top;
  let right = top;
  while (left > 0 && real[left - 1]! > half) left -= 1;
  while (right < real.length - 1 && real[right + 1]! > half) right += 1;
  return Math.max((right - left + 1) * stepHz, least);
}
