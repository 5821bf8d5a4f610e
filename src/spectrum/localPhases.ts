import type { ComplexSpectrum } from './complexSpectrum.js';
import type { Peak } from './findPeaks.js';
import { fitGroup, type GroupFit, type SlopeOf } from './fitGroup.js';
import { groupPeaks, type PeakGroup } from './groupPeaks.js';

const groupCountMax = 14;

/**
 * Measures the phase at each of the strongest groups of neighbouring lines.
 *
 * @param spectrum shape (n), not phased
 * @param peaks    maxima of the magnitude, strongest first
 * @param noise    rms of one quadrature
 * @param slope    first-order phase known so far
 * @param additions lines that each fit may add
 * @returns one fit a group
 * @source `fitGroup`
 */
export function localPhases(
  spectrum: ComplexSpectrum,
  peaks: readonly Peak[],
  noise: number,
  slope: SlopeOf,
  additions: number,
): GroupFit[] {
  const strength = ({ members }: PeakGroup) => Math.max(...members.map(({ magnitude }) => magnitude));
  const groups = groupPeaks(peaks, spectrum.real.length).sort((a, b) => strength(b) - strength(a));
  return groups.slice(0, groupCountMax).flatMap((group) => fitGroup(spectrum, group, noise, slope, additions) ?? []);
}
