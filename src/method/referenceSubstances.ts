/** A substance that pins the ppm scale by name alone. */
export interface ReferenceSubstance {
  readonly shiftPpm: number;
  readonly nucleus: string;
}

/**
 * Known reference substances. HDO moves by about -0.01 ppm/K; 4.79 holds near 25 degrees C.
 *
 * @source IUPAC recommendations 2001 and 2008 (tetramethylsilane and its water-soluble relatives at 0 by definition); HDO:
 *   Fulmer et al., Organometallics 2010, 29, 2176; trichlorofluoromethane 0 for 19F by definition; hexafluorobenzene
 *   -164.9 ppm and trifluorotoluene -63.72 ppm in CDCl3 (from memory)
 */
export const referenceSubstances: Readonly<Record<string, ReferenceSubstance>> = {
  tetramethylsilane: { shiftPpm: 0, nucleus: '1H' },
  TMS: { shiftPpm: 0, nucleus: '1H' },
  DSS: { shiftPpm: 0, nucleus: '1H' },
  TSP: { shiftPpm: 0, nucleus: '1H' },
  trimethylsilylpropanoate: { shiftPpm: 0, nucleus: '1H' },
  HDO: { shiftPpm: 4.79, nucleus: '1H' },
  trichlorofluoromethane: { shiftPpm: 0, nucleus: '19F' },
  hexafluorobenzene: { shiftPpm: -164.9, nucleus: '19F' },
  trifluorotoluene: { shiftPpm: -63.72, nucleus: '19F' },
};
