import type { Flag } from '../base/flag.js';
import type { Acquisition } from '../decode/acquisition.js';
import type { Method } from '../method/method.js';
import { qualityOf } from '../method/qualityDefaults.js';
import type { Spectrum } from './spectrum.js';

/**
 * What a chemist should know of the quality of this spectrum before trusting its numbers.
 *
 * @param maskedShare share of the points that hold signal
 * @returns flags with the thresholds of the method's `quality` block or their defaults
 */
export function qualityFlags(
  acquisition: Acquisition,
  spectrum: Omit<Spectrum, 'flags'>,
  maskedShare: number,
  method: Method,
): Flag[] {
  const { quality } = method;
  const flags: Flag[] = [];
  const add = (code: string, message: string) => flags.push({ code, message });
  if (acquisition.kind === 'fid' && clippedPoints(acquisition) >= qualityOf(quality, 'clipped_points')) {
    add('receiver-overload', 'the start of the FID is flattened at its largest value: the receiver was overloaded');
  }
  const widthHz = spectrum.reference.widthHz;
  const widthMax = qualityOf(quality, 'width_hz');
  if (widthHz !== undefined && widthHz > widthMax)
    add('lines-broad', `the reference line is ${widthHz.toFixed(1)} Hz wide; at most ${widthMax} Hz are usual`);
  const pointsMin = qualityOf(quality, 'points_across_line');
  if (widthHz !== undefined && widthHz / spectrum.stepHz < pointsMin) {
    add(
      'points-too-few',
      `only ${(widthHz / spectrum.stepHz).toFixed(1)} points lie across the reference line; ${pointsMin} are wanted`,
    );
  }
  if (maskedShare > qualityOf(quality, 'masked_share'))
    add(
      'baseline-uncertain',
      `${(100 * maskedShare).toFixed(0)} % of the spectrum hold signal: little is left to lay a baseline through`,
    );
  const { longestT1S, relaxationDelayS = acquisition.relaxationDelayS } = method.acquisition;
  if (longestT1S !== undefined && relaxationDelayS !== undefined) {
    const totalS = relaxationDelayS + (spectrum.acquisitionS ?? 0);
    const needed = qualityOf(quality, 'repetition_over_t1') * longestT1S;
    if (totalS < needed)
      add(
        'repetition-short',
        `scans follow each other after ${totalS.toFixed(1)} s; ${needed.toFixed(0)} s are wanted for a longest T1 of ${longestT1S} s`,
      );
  }
  return flags;
}

/** Points that lie within a thousandth of the largest value of their channel, beyond the one that is the largest. */
function clippedPoints({ real, imag }: Acquisition): number {
  const count = (values: Float64Array) => {
    let most = 0;
    for (const value of values) most = Math.max(most, Math.abs(value));
    let near = 0;
    for (const value of values) if (Math.abs(value) > 0.9995 * most) near += 1;
    return most > 0 ? near - 1 : 0;
  };
  return Math.max(count(real), imag ? count(imag) : 0);
}
