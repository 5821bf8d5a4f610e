import type { Spectrum } from '../spectrum/spectrum.js';
import { extraPrefix } from './addExtraLines.js';
import type { FittedRegion } from './fitRegions.js';
import type { MeasuredSignal, Verdict } from './measured.js';
import { patternWords } from './patternWords.js';
import type { Target } from './signalTargets.js';
import { linesOfFit } from './tailsOf.js';

type Judged = Pick<MeasuredSignal, 'verdict' | 'words'> &
  Partial<Pick<MeasuredSignal, 'found' | 'leftOver' | 'other' | 'neighboursImplied'>>;

/** Lines of another signal this close cannot be told apart by eye. */
const crowdedWidths = 1.5;
/** Neighbours below this share of the signal do not crowd it. */
const crowdedShare = 0.02;
/** Relative rms misfit above which the lines are not the declared pattern's. */
const misfitMax = 0.12;

/**
 * The verdict on one signal's declared pattern, with its numbers and in words.
 *
 * @source  own
 */
export function verdictOf(
  spectrum: Spectrum,
  fitted: FittedRegion,
  target: Target,
  { area, isPresent }: { readonly area: number; readonly isPresent: boolean },
): Judged {
  const declared = patternWords(target.signal.pattern);
  if (!isPresent) return { verdict: 'absent', words: `${declared} absent` };
  const leftOver = leftOverOf(spectrum, fitted, target, area);
  const rest = leftOver ? `; ${percent(leftOver.share)} left over at ${leftOver.shiftPpm.toFixed(3)} ppm` : '';
  if (misfitOf(fitted, target) > misfitMax) {
    return { verdict: 'differs', ...(leftOver ? { leftOver } : {}), words: `the lines are not those of a ${declared}${rest}` };
  }
  const crowd = crowdedBy(fitted, target, area);
  const verdict: Verdict = crowd !== undefined ? 'crowded' : 'matches';
  const words = crowd !== undefined ? `${declared}, its lines crowded by ${crowd}${rest}` : `${declared} as expected${rest}`;
  return { verdict, found: target.signal.pattern.text, ...(leftOver ? { leftOver } : {}), words };
}

function leftOverOf(spectrum: Spectrum, fitted: FittedRegion, target: Target, area: number): MeasuredSignal['leftOver'] {
  const { fit } = fitted;
  const lines = linesOfFit(fit);
  const own = lines.filter((line) => line.key === target.key);
  const reach = 6 * own[0]!.widthHz;
  const high = Math.max(...own.map((line) => line.shiftHz)) + reach;
  const low = Math.min(...own.map((line) => line.shiftHz)) - reach;
  let sum = 0;
  let variance = 0;
  let top: { area: number; shiftHz: number } | undefined;
  fit.model.terms.forEach(({ key, shift }, t) => {
    if (!key.startsWith(extraPrefix)) return;
    const shiftHz = fit.values[shift]!;
    const extra = fit.areas[t]!;
    if (shiftHz > high || shiftHz < low) return;
    sum += extra;
    variance += fit.covariance[t * fit.size + t]!;
    if (extra > (top?.area ?? 0)) top = { area: extra, shiftHz };
  });
  if (top === undefined) return undefined;
  const total = Math.max(area, 0) + sum;
  return { share: sum / total, u: Math.sqrt(variance) / total, shiftPpm: top.shiftHz / spectrum.observeMhz };
}

/** rms of the residual beyond noise over rms of the signal, around the signal's lines. */
function misfitOf(fitted: FittedRegion, target: Target): number {
  const { fit, window } = fitted;
  const own = linesOfFit(fit).filter((line) => line.key === target.key);
  let excess = 0;
  let power = 0;
  let count = 0;
  for (const line of own) {
    const reach = 2 * line.widthHz;
    const from = Math.max(0, Math.floor((window.firstHz - line.shiftHz - reach) / window.stepHz));
    const to = Math.min(window.data.length, Math.ceil((window.firstHz - line.shiftHz + reach) / window.stepHz));
    for (let i = from; i < to; i += 1) {
      excess += fit.residual[i]! ** 2 - window.noise ** 2;
      count += 1;
      power += (fit.fit[i]! - fit.level) ** 2;
    }
  }
  // The sum scatters by sigma^2 sqrt(2 n) by itself.
  if (excess < 5 * window.noise ** 2 * Math.sqrt(2 * count)) return 0;
  return power > 0 ? Math.sqrt(Math.max(0, excess) / power) : 0;
}

function crowdedBy(fitted: FittedRegion, target: Target, area: number): string | undefined {
  const lines = linesOfFit(fitted.fit);
  const own = lines.filter((line) => line.key === target.key && line.area > 0.02 * area);
  const near = lines.find(
    (line) =>
      line.key !== target.key &&
      !line.key.startsWith(extraPrefix) &&
      line.area > crowdedShare * area &&
      own.some((mine) => Math.abs(mine.shiftHz - line.shiftHz) < crowdedWidths * Math.max(mine.widthHz, line.widthHz)),
  );
  return near?.key;
}

function percent(share: number): string {
  const value = share * 100;
  return `${value < 9.95 ? Number(value.toPrecision(1 + (value >= 1 ? 0 : 0))) : Math.round(value)} %`;
}
