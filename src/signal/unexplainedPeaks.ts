import type { Method } from '../method/method.js';
import { extraPrefix } from './addExtraLines.js';
import type { BinnedSpectrum } from './binSpectrum.js';
import type { FittedRegion } from './fitRegions.js';
import { type Peak, pickPeaks } from './pickPeaks.js';
import { type FittedLine, sticksOf, tailsOf } from './tailsOf.js';

/** Areas over their noise from which a line is reported; `quality.unassigned_over_noise` of a method overrides it. */
export const scoreDefault = 5;
const faintScore = 2.2;
/** Beside a line, this share of it may be a fault of its shape, more where the shape is known to misfit. */
const shapeShare = 0.0015;
const shapeMisfits = 3;
const shapeReachWidths = 40;
const shapeSkirtWidths = 4;
/** Listed ranges are read off by eye. */
const edgePpm = 0.02;

/** What is left of a spectrum when all that was fitted is taken off. */
export interface Residual {
  /** shape (n), units of the spectrum. */
  readonly trace: Float64Array;
  readonly peaks: readonly Peak[];
  /** Weaker ones as well: good enough to see the mirror image of a peak, not to report. */
  readonly faint: readonly Peak[];
  /** Lines that are explained, tall ones first. */
  readonly lines: readonly FittedLine[];
}

/**
 * Picks the lines that no fitted signal explains.
 *
 * @param widthHz line width of the spectrum
 * @param misfit  relative misfit of the shared line shape
 * @returns peaks by descending shift
 * @source  see `pickPeaks`
 */
export function unexplainedPeaks(
  spectrum: BinnedSpectrum,
  regions: readonly FittedRegion[],
  method: Method,
  { widthHz, misfit }: { readonly widthHz: number; readonly misfit: number },
): Residual {
  const scoreMin = method.quality.unassigned_over_noise ?? scoreDefault;
  const hiddenPpm = hiddenRanges(method);
  const { real, noise, stepHz, firstPpm, observeMhz } = spectrum;
  const declared = regions.map(({ fit }) => ({ fit: withoutExtras(fit) }));
  const model = tailsOf(spectrum, 0, real.length, declared);
  const trace = real.map((value, i) => value - model[i]!);
  const lines = regions.flatMap(({ fit }) => sticksOf(fit)).filter(({ key }) => !key.startsWith(extraPrefix));
  const areaU = 1.5 * noise * Math.sqrt(Math.PI * widthHz * stepHz);
  const faint = pickPeaks(trace, firstPpm * observeMhz, stepHz, widthHz, faintScore * areaU);
  const found = faint.filter(({ area }) => area > scoreMin * areaU);
  const tall = lines.filter((line) => line.area > 0).sort((a, b) => b.area - a.area || b.shiftHz - a.shiftHz);
  const share = shapeShare + shapeMisfits * misfit;
  const peaks = found.filter((peak) => {
    const ppm = peak.shiftHz / observeMhz;
    if (hiddenPpm.some(([low, high]) => ppm >= low && ppm <= high)) return false;
    const shadow = tall.reduce((sum, line) => {
      const off = Math.abs(line.shiftHz - peak.shiftHz) / line.widthHz;
      if (off > shapeReachWidths) return sum;
      return sum + (share * line.area * (widthHz / line.widthHz)) / (1 + (off / shapeSkirtWidths) ** 2);
    }, 0);
    return peak.area > shadow;
  });
  return { trace, peaks, faint, lines: tall };
}

/** Ranges [low, high] in ppm where lines were never declared singly (`m`): nothing there is unexplained. */
export function hiddenRanges(method: Method): (readonly [number, number])[] {
  return method.species
    .flatMap((species) => species.signals)
    .filter(({ pattern, rangePpm }) => pattern.isMultiplet || rangePpm !== undefined)
    .map(({ rangePpm, shiftPpm, withinPpm }): readonly [number, number] =>
      rangePpm ? [rangePpm[0] - edgePpm, rangePpm[1] + edgePpm] : [shiftPpm - withinPpm, shiftPpm + withinPpm],
    );
}

function withoutExtras(fit: FittedRegion['fit']): FittedRegion['fit'] {
  return { ...fit, areas: fit.areas.map((area, t) => (fit.model.terms[t]!.key.startsWith(extraPrefix) ? 0 : area)) };
}
