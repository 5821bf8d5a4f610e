import type { Method } from '../method/method.js';
import type { Spectrum } from '../spectrum/spectrum.js';
import type { FittedRegion } from './fitRegions.js';
import type { SolventFinding } from './measured.js';

/**
 * Looks for the residual solvents of the method's limit table. The seam stands here; without a fit nothing is claimed.
 *
 * @param regions what the declared signals explain
 * @returns none yet
 * @source  none yet
 */
export function measureSolvents(
  _spectrum: Spectrum,
  _method: Method,
  _regions: readonly FittedRegion[],
): readonly SolventFinding[] {
  return [];
}
