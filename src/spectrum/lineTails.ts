import type { Raw } from './complexFrom.js';
import type { FoundLines } from './findLines.js';

/** A line as the baseline sees it: its absorption is area x (w/2) / pi / (d^2 + (w/2)^2), all in points. */
export interface LineTails {
  /** Fractional index in the spectrum. */
  readonly index: number;
  /** Sum of the line over points. */
  readonly area: number;
  /** Full width at half height, points. */
  readonly widthPoints: number;
  /** False when the area is only the height at the top times the width. */
  readonly isFitted: boolean;
}

/**
 * The lines of the analysis as they stand in the spectrum proper, which has another grid and a weaker window.
 *
 * @param raw   spectrum and analysis
 * @param found lines and fits, in points of the analysis
 * @returns one entry a line
 */
export function lineTails({ spectrum, analysis, analysisBroadeningHz }: Raw, found: FoundLines): LineTails[] {
  const scale = analysis.stepHz / spectrum.stepHz;
  const place = (index: number) => (index - analysis.real.length / 2) * scale + spectrum.real.length / 2;
  const narrower = (widthPoints: number) =>
    Math.max(0.3 * widthPoints * scale, widthPoints * scale - analysisBroadeningHz / spectrum.stepHz);
  const fitted = new Map<unknown, number>();
  for (const { columns, coefficients } of found.local)
    columns.forEach(({ peak, power, isTurned }, k) => {
      if (power === 1 && !isTurned && coefficients[k]! > 0) fitted.set(peak, coefficients[k]!);
    });
  return found.peaks.map((peak) => {
    const height = fitted.get(peak) ?? peak.magnitude;
    const isFitted = fitted.has(peak) && Math.abs(height / peak.magnitude - 1) < 0.5;
    const area = (Math.PI / 2) * (isFitted ? height : peak.magnitude) * peak.widthPoints * scale;
    return { index: place(peak.index), area, widthPoints: narrower(peak.widthPoints), isFitted };
  });
}
