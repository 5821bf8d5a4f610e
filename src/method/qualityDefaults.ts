/** A threshold of a quality flag: its default, unit and meaning. A method's `quality` block overrides it by name. */
export interface QualityDefault {
  readonly value: number;
  readonly unit: string;
  readonly meaning: string;
}

/** Every threshold that a method may set, in one place. */
export const qualityDefaults: Readonly<Record<string, QualityDefault>> = {};

/** The threshold in force: the method's own, else the default. */
export function qualityOf(quality: Readonly<Record<string, number>>, name: string): number {
  return quality[name] ?? qualityDefaults[name]?.value ?? Number.NaN;
}
