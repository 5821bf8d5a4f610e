import type { Spectrum } from '../spectrum/spectrum.js';
import type { SharedShape } from './buildRegionModel.js';
import { fitRegions } from './fitRegions.js';
import type { Region } from './groupRegions.js';
import type { Located } from './locateSignals.js';
import type { Whitening } from './whiteningFilter.js';

const loose = { logWidthSigma: 1, phase: 0, phaseSigma: 0.1, lorentzShare: 1, lorentzShareU: 0 };
const teachersMax = 4;

/**
 * Learns the line shape of a spectrum from its strongest signals.
 *
 * @param guessHz width to start from
 * @returns width (area-weighted middle of the teachers), its spread, Lorentz share and residual phase
 * @source  own; pseudo-Voigt as in G. K. Wertheim et al., Rev. Sci. Instrum. 1974, 45, 1369 (from memory)
 */
export function learnShape(
  spectrum: Spectrum,
  regions: readonly Region[],
  located: ReadonlyMap<string, Located>,
  guessHz: number,
  whitening: Whitening,
): SharedShape {
  const start: SharedShape = { ...loose, widthHz: guessHz };
  const gain = (region: Region) => Math.max(...region.targets.map(({ key }) => located.get(key)!.gain));
  const teachers = regions
    .filter((region) => gain(region) > 100 && region.targets.every(({ signal }) => !signal.pattern.isBroad))
    .sort((a, b) => a.targets.length - b.targets.length || gain(b) - gain(a))
    .slice(0, teachersMax);
  if (teachers.length === 0) return { ...start, logWidthSigma: 0.4 };
  const fits = fitRegions(spectrum, teachers, located, start, whitening);
  const widths = fits.map(({ fit }) => fit.values[fit.model.terms[0]!.widths[0]!]!).sort((a, b) => a - b);
  const middle = widths[Math.floor((widths.length - 1) / 2)]!;
  return { ...start, widthHz: Math.exp(middle), logWidthSigma: 0.2, phaseSigma: 0.05 };
}
