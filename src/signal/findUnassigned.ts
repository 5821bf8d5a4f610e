import type { Method } from '../method/method.js';
import type { BinnedSpectrum } from './binSpectrum.js';
import { isShadow } from './isShadow.js';
import type { Unassigned } from './measured.js';
import type { Peak } from './pickPeaks.js';
import { readMultiplet } from './readMultiplet.js';
import { suggestImpurity } from './suggestImpurity.js';
import { hiddenRanges, type Residual, scoreDefault } from './unexplainedPeaks.js';
import type { Whitening } from './whiteningFilter.js';

const countMax = 40;
/** Lines further apart than this do not belong to one multiplet of protons. */
const groupHz = 19;

/**
 * Lists what no species, solvent, water, reference, satellite or side band explains, grouped into multiplets.
 *
 * @param residual what is left when all that was fitted is taken off
 * @param widthHz line width of the spectrum
 * @returns by descending shift, at most 40: the largest
 * @source  own; suggestions from published shifts (`suggestImpurity`)
 */
export function findUnassigned(
  spectrum: BinnedSpectrum,
  method: Method,
  residual: Residual,
  { widthHz, whitening }: { readonly widthHz: number; readonly whitening: Whitening },
): readonly Unassigned[] {
  const { observeMhz } = spectrum;
  const hidden = hiddenRanges(method);
  const scoreMin = method.quality.unassigned_over_noise ?? scoreDefault;
  const strong = joined([...residual.lines, ...residual.peaks], widthHz);
  const isBlind = (shiftHz: number) =>
    residual.lines.some((line) => Math.abs(line.shiftHz - shiftHz) < 4 * line.widthHz) ||
    hidden.some(([low, high]) => shiftHz / observeMhz > low && shiftHz / observeMhz < high);
  const open = residual.peaks.filter((peak) => !isShadow(peak, residual.faint, strong, spectrum.nucleus, isBlind));
  return grouped(open)
    .map((peaks) => readMultiplet(spectrum, residual.trace, peaks, widthHz, whitening))
    .filter((found) => found.area > scoreMin * found.u)
    .sort((a, b) => b.area - a.area || b.shiftPpm - a.shiftPpm)
    .slice(0, countMax)
    .sort((a, b) => b.shiftPpm - a.shiftPpm)
    .map((found) => {
      const suggestion = spectrum.nucleus === '1H' ? suggestImpurity(found.shiftPpm, found.pattern, method.solvent) : undefined;
      return { ...found, ...(suggestion !== undefined ? { suggestion } : {}) };
    });
}

/** Lines that stand closer than they are wide show as one, and have one pair of satellites. */
function joined(lines: readonly Peak[], widthHz: number): Peak[] {
  const tops: { shiftHz: number; area: number }[] = [];
  for (const { shiftHz, area } of [...lines].sort((a, b) => b.shiftHz - a.shiftHz)) {
    const last = tops.at(-1);
    if (area <= 0) continue;
    if (last !== undefined && last.shiftHz - shiftHz < 0.6 * widthHz) {
      last.shiftHz = (last.shiftHz * last.area + shiftHz * area) / (last.area + area);
      last.area += area;
    } else tops.push({ shiftHz, area });
  }
  return tops;
}

function grouped(peaks: readonly Peak[]): Peak[][] {
  const groups: Peak[][] = [];
  for (const peak of peaks) {
    const last = groups.at(-1);
    if (last !== undefined && last.at(-1)!.shiftHz - peak.shiftHz < groupHz) last.push(peak);
    else groups.push([peak]);
  }
  return groups;
}
