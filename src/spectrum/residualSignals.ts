/** Residual signals of a deuterated solvent and its water. */
export interface ResidualSolvent {
  readonly signals: readonly { readonly shiftPpm: number; readonly deuterons: number; readonly couplingHz: number }[];
  readonly waterPpm?: number;
}

const one = (shiftPpm: number, deuterons = 0, couplingHz = 0) => ({ shiftPpm, deuterons, couplingHz });

/**
 * @source Fulmer et al., Organometallics 2010, 29, 2176, Table 1 (shifts and water, as published); couplings to deuterium from
 *   published solvent charts and from memory, as marked in the shared table of deuterated solvents
 */
export const residualSignals: Readonly<Record<string, ResidualSolvent>> = {
  CDCl3: { signals: [one(7.26)], waterPpm: 1.56 },
  CD2Cl2: { signals: [one(5.32, 1, 1.1)], waterPpm: 1.52 },
  'DMSO-d6': { signals: [one(2.5, 2, 1.9)], waterPpm: 3.33 },
  'acetone-d6': { signals: [one(2.05, 2, 2.2)], waterPpm: 2.84 },
  CD3CN: { signals: [one(1.94, 2, 2.5)], waterPpm: 2.13 },
  CD3OD: { signals: [one(3.31, 2, 1.7)], waterPpm: 4.87 },
  D2O: { signals: [one(4.79)], waterPpm: 4.79 },
  C6D6: { signals: [one(7.16)], waterPpm: 0.4 },
  'toluene-d8': { signals: [one(2.08, 2, 2.3), one(6.97), one(7.01), one(7.09)], waterPpm: 0.43 },
  'THF-d8': { signals: [one(1.72), one(3.58)], waterPpm: 2.46 },
  C6D5Cl: { signals: [one(6.96), one(6.99), one(7.14)], waterPpm: 1.03 },
  TFE: { signals: [one(5.02), one(3.88)], waterPpm: 3.66 },
};
