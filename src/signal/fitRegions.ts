import type { BinnedSpectrum } from './binSpectrum.js';
import { buildRegionModel, type SharedShape } from './buildRegionModel.js';
import { fitFromStarts } from './fitFromStarts.js';
import { fitRegion } from './fitRegion.js';
import type { Region } from './groupRegions.js';
import type { Located } from './locateSignals.js';
import type { RegionFit, RegionWindow } from './regionModel.js';
import { regionWindow } from './regionWindow.js';
import { tailsOf } from './tailsOf.js';
import type { Whitening } from './whiteningFilter.js';

/** A region with its points and its fit. */
export interface FittedRegion {
  readonly region: Region;
  readonly window: RegionWindow;
  readonly fit: RegionFit;
}

/**
 * Fits every region, strongest first, taking the tails of those already fitted off the others; further sweeps let the first
 * ones see the tails of the last.
 *
 * @param shape the line shape shared by the spectrum
 * @returns in the order of `regions`
 * @source  block-wise relaxation (Gauss-Seidel, textbook)
 */
export function fitRegions(
  spectrum: BinnedSpectrum,
  regions: readonly Region[],
  located: ReadonlyMap<string, Located>,
  shape: SharedShape,
  whitening: Whitening,
): FittedRegion[] {
  const order = regions
    .map((region, index) => ({ index, gain: Math.max(...region.targets.map(({ key }) => located.get(key)!.gain)) }))
    .sort((a, b) => b.gain - a.gain || a.index - b.index)
    .map(({ index }) => index);
  const fitted: (FittedRegion | undefined)[] = regions.map(() => undefined);
  for (let sweep = 0; sweep < 3; sweep += 1) {
    for (const index of order) {
      const region = regions[index]!;
      const others = fitted.filter((other, k): other is FittedRegion => k !== index && other !== undefined);
      const outside = tailsOf(spectrum, region.from, region.to, others);
      const before = fitted[index];
      // Tails below a fraction of the noise change nothing: the first fit stands.
      if (before !== undefined && !differ(before.window, spectrum, outside)) continue;
      const window = regionWindow(spectrum, { from: region.from, to: region.to, whitening, ...shape, outside });
      const model = before?.fit ? restart(before.fit) : buildRegionModel(region.targets, located, shape, spectrum.observeMhz);
      fitted[index] = { region, window, fit: before ? fitRegion(window, model) : fitFromStarts(window, model) };
    }
  }
  return fitted.map((one) => one!);
}

function restart(fit: RegionFit) {
  return { ...fit.model, parameters: fit.model.parameters.map((parameter, k) => ({ ...parameter, start: fit.values[k]! })) };
}

/** Whether the tails to take off changed by more than a fiftieth of the noise anywhere. */
function differ(window: RegionWindow, spectrum: BinnedSpectrum, outside: Float64Array): boolean {
  for (let i = 0; i < window.data.length; i += 1) {
    const before = spectrum.real[window.from + i]! - window.data[i]!;
    if (Math.abs(before - outside[i]!) > 0.02 * window.noise) return true;
  }
  return false;
}
