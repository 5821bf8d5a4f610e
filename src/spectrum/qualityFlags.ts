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
  const asymmetry = spectrum.quality.referenceAsymmetry;
  if (asymmetry !== undefined && Math.abs(asymmetry) > qualityOf(quality, 'asymmetry'))
    add('lines-asymmetric', `the reference line reaches farther to one side (asymmetry ${asymmetry.toFixed(2)}): check the shim`);
  const leftOver = decayLeft(spectrum);
  if (leftOver !== undefined && leftOver > qualityOf(quality, 'decay_left'))
    add(
      'acquisition-short',
      `the FID was cut when ${(100 * leftOver).toFixed(0)} % of the signal was left: lines carry ripples; acquire longer`,
    );
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

/** What is left of the reference line's signal at the end of the acquisition, the window taken out; needs the width of one line. */
function decayLeft(spectrum: Omit<Spectrum, 'flags'>): number | undefined {
  const { acquisitionS, reference, steps } = spectrum;
  const window = steps.find(({ step }) => step === 'window')?.parameters.line_broadening_hz;
  if (acquisitionS === undefined || reference.widthHz === undefined || typeof window !== 'number') return undefined;
  return Math.exp(-Math.PI * Math.max(0, reference.widthHz - window) * acquisitionS);
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
