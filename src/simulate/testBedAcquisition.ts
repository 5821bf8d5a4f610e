import type { Acquisition } from '../decode/acquisition.js';
import type { BedTiming } from './testBedFid.js';

/** A case's FID with its noise, as the decoder would hand it on. */
export function acquisitionOf(
  seed: number,
  clean: { real: Float64Array; imag: Float64Array },
  noise: { real: Float64Array; imag: Float64Array },
  { observeMhz, dwellS }: BedTiming,
): Acquisition {
  return {
    kind: 'fid',
    title: `test bed ${seed}`,
    nucleus: '1H',
    observeMhz,
    real: clean.real.map((value, k) => value + noise.real[k]!),
    imag: clean.imag.map((value, k) => value + noise.imag[k]!),
    dwellS,
    spectralWidthHz: 1 / dwellS,
    acquiredSource: 'none',
    dataSha256: '',
    flags: [],
  };
}
