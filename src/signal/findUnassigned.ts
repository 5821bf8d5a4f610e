import type { Method } from '../method/method.js';
import type { Spectrum } from '../spectrum/spectrum.js';
import type { FittedRegion } from './fitRegions.js';
import type { Unassigned } from './measured.js';

export function findUnassigned(_spectrum: Spectrum, _method: Method, _regions: readonly FittedRegion[]): readonly Unassigned[] {
  return [];
}
