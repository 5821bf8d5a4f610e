import type { FittedRegion } from './fitRegions.js';
import type { Target } from './signalTargets.js';
import { sticksOf } from './tailsOf.js';

const aroundWidths = 2;

/**
 * Relative misfit of a declared pattern: rms of the residual beyond the noise over rms of the signal, around its lines.
 *
 * @returns 0 when the noise explains the residual
 * @source  own
 */
export function misfitOf(fitted: Pick<FittedRegion, 'fit' | 'window'>, target: Target): number {
  const { excess, power, scatter } = sumsOf(fitted, target);
  return power > 0 && excess > 5 * scatter ? Math.sqrt(excess / power) : 0;
}

/** The smallest misfit that `misfitOf` could have told from noise. */
export function detectableMisfit(fitted: Pick<FittedRegion, 'fit' | 'window'>, target: Target): number {
  const { power, scatter } = sumsOf(fitted, target);
  return power > 0 ? Math.sqrt((5 * scatter) / power) : Number.POSITIVE_INFINITY;
}

function sumsOf({ fit, window }: Pick<FittedRegion, 'fit' | 'window'>, target: Target) {
  let excess = 0;
  let power = 0;
  let count = 0;
  for (const line of sticksOf(fit)) {
    if (line.key !== target.key) continue;
    const reach = aroundWidths * line.widthHz;
    const from = Math.max(0, Math.floor((window.firstHz - line.shiftHz - reach) / window.stepHz));
    const to = Math.min(window.data.length, Math.ceil((window.firstHz - line.shiftHz + reach) / window.stepHz));
    for (let i = from; i < to; i += 1) {
      excess += fit.residual[i]! ** 2 - window.noise ** 2;
      power += (fit.fit[i]! - fit.level) ** 2;
    }
    count += Math.max(0, to - from);
  }
  // The sum of squares of noise scatters by sigma^2 sqrt(2 n) by itself.
  return { excess, power, scatter: window.noise ** 2 * Math.sqrt(2 * count) };
}
