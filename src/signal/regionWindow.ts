import type { Spectrum } from '../spectrum/spectrum.js';
import type { RegionWindow } from './regionModel.js';
import type { Whitening } from './whiteningFilter.js';

/**
 * Cuts the points of a region out of a spectrum, less what other regions explain there.
 *
 * @param from    index of the first point
 * @param to      index behind the last point
 * @param outside shape (to - from) or absent: what other regions explain there
 * @returns the window; its axis is in Hz from zero shift
 * @source  own
 */
export function regionWindow(
  spectrum: Spectrum,
  from: number,
  to: number,
  whitening: Whitening,
  outside?: Float64Array,
): RegionWindow {
  const data = spectrum.real.slice(from, to);
  if (outside !== undefined) for (let i = 0; i < data.length; i += 1) data[i] = data[i]! - outside[i]!;
  return {
    from,
    to,
    firstHz: spectrum.firstPpm * spectrum.observeMhz - from * spectrum.stepHz,
    stepHz: spectrum.stepHz,
    ...(spectrum.acquisitionS !== undefined ? { acquisitionS: spectrum.acquisitionS } : {}),
    data,
    noise: Math.max(spectrum.noise, Number.MIN_VALUE),
    filter: whitening.filter,
    filteredCorrelation: whitening.remaining,
    baselineU: Math.max(spectrum.baselineU, 0.01 * spectrum.noise, Number.MIN_VALUE),
  };
}
