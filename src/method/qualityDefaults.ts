/** A threshold of a quality flag: its default, unit and meaning. A method's `quality` block overrides it by name. */
export interface QualityDefault {
  readonly value: number;
  readonly unit: string;
  readonly meaning: string;
}

/** Every threshold that a method may set, in one place. */
export const qualityDefaults: Readonly<Record<string, QualityDefault>> = {
  clipped_points: {
    value: 6,
    unit: 'points',
    meaning: 'points at the largest value of a FID from which on the receiver counts as overloaded',
  },
  width_hz: { value: 5, unit: 'Hz', meaning: 'full width of the reference line above which lines count as broad' },
  asymmetry: {
    value: 0.35,
    unit: 'share',
    meaning: 'asymmetry of the reference line at a fifth of its height above which the shim is questioned',
  },
  decay_left: {
    value: 0.3,
    unit: 'share',
    meaning: 'share of the signal left at the end of the FID above which the acquisition was too short',
  },
  points_across_line: {
    value: 3,
    unit: 'points',
    meaning: 'points across the reference line below which the spectrum is too coarse',
  },
  masked_share: {
    value: 0.7,
    unit: 'share',
    meaning: 'share of the points holding signal above which the baseline is uncertain',
  },
  repetition_over_t1: { value: 5, unit: 'times T1', meaning: 'repetition time wanted, in multiples of the longest T1' },
};

/** The threshold in force: the method's own, else the default. */
export function qualityOf(quality: Readonly<Record<string, number>>, name: string): number {
  return quality[name] ?? qualityDefaults[name]?.value ?? Number.NaN;
}
