import type { BinnedSpectrum } from './binSpectrum.js';
import type { RegionWindow } from './regionModel.js';
import { spectrumAxis } from './tailsOf.js';
import type { Whitening } from './whiteningFilter.js';

export interface WindowSettings {
  /** Index of the first point and behind the last. */
  readonly from: number;
  readonly to: number;
  readonly whitening: Whitening;
  /** Relative misfit of the line shape on strong lines; 0: none is known. */
  readonly misfit: number;
  readonly widthHz: number;
  /** shape (to - from) or absent: what other regions explain there. */
  readonly outside?: Float64Array;
}

/**
 * Cuts the points of a region out of a spectrum, less what other regions explain there.
 *
 * Where lines stand so high above the noise that the shape of a line is the lesser-known part, their points count less: each is
 * trusted to the noise and to the shape's own relative misfit, added in quadrature.
 *
 * @returns the window; its axis is in Hz from zero shift
 * @source  own
 */
export function regionWindow(
  spectrum: BinnedSpectrum,
  { from, to, whitening, misfit, widthHz, outside }: WindowSettings,
): RegionWindow {
  const data = spectrum.real.slice(from, to);
  if (outside !== undefined) for (let i = 0; i < data.length; i += 1) data[i] = data[i]! - outside[i]!;
  const tallest = misfit > 0 ? data.reduce((most, value) => Math.max(most, value), 0) : 0;
  // Whitening sharpens what the model does not know: it helps only where noise is what limits.
  const isShapeLimited = misfit * tallest > 3 * spectrum.noise;
  const whitened = { filter: whitening.filter, filteredCorrelation: whitening.remaining };
  return {
    from,
    to,
    ...spectrumAxis(spectrum, from),
    blur: spectrum.blur,
    rippleFactor: spectrum.rippleFactor,
    data,
    noise: Math.max(spectrum.noise, Number.MIN_VALUE),
    ...(isShapeLimited ? { filter: one, filteredCorrelation: whitening.original } : whitened),
    ...(misfit > 0 ? { trust: trustOf(data, spectrum.noise, misfit, widthHz / spectrum.stepHz) } : {}),
    // Beside a tall line the baseline is no better known than the line's own tails.
    baselineU: Math.max(Math.hypot(spectrum.baselineU, 0.5 * misfit * tallest), 0.01 * spectrum.noise, Number.MIN_VALUE),
  };
}

const one = Float64Array.of(1);

/** How far, in line widths, and how strongly the shape error of a tall line counts beside it. */
const skirtWidths = 8;
const skirtShare = 0.4;

function trustOf(data: Float64Array, noise: number, misfit: number, widthPoints: number): Float64Array {
  const reach = Math.ceil(skirtWidths * widthPoints);
  const skirts = runningMaximum(data, reach);
  return data.map((_, i) => {
    const height = Math.max(Math.abs(data[i]!), Math.abs(data[i - 1] ?? 0), Math.abs(data[i + 1] ?? 0), skirtShare * skirts[i]!);
    const unknown = (misfit * height) / noise;
    return 1 / Math.sqrt(1 + unknown * unknown);
  });
}

/** Largest absolute value within `reach` points, coarse: by blocks of a quarter of the reach. */
function runningMaximum(data: Float64Array, reach: number): Float64Array {
  const block = Math.max(1, Math.floor(reach / 4));
  const blocks = Float64Array.from({ length: Math.ceil(data.length / block) }, (_, b) => {
    let most = 0;
    for (let i = b * block; i < Math.min(data.length, (b + 1) * block); i += 1) most = Math.max(most, Math.abs(data[i]!));
    return most;
  });
  return data.map((_, i) => {
    const own = Math.floor(i / block);
    let most = 0;
    for (let b = Math.max(0, own - 4); b <= Math.min(blocks.length - 1, own + 4); b += 1) most = Math.max(most, blocks[b]!);
    return most;
  });
}
