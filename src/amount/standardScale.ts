import type { Method, RunFile } from '../method/method.js';
import type { Amounts } from './amounts.js';

/** Factor from area per nucleus to amount, with the relative standard uncertainty of the factor. */
export interface Scale {
  readonly unit: Amounts['unit'];
  readonly factor: number;
  readonly relativeU: number;
}

/**
 * Finds the scale of a time point: mmol per g of sample when an internal standard was weighed, mol/L when its concentration
 * is given, else relative.
 *
 * @param standardArea area per nucleus of the standard; absent when the method has none or it was not measured
 * @returns factor such that amount = area per nucleus x factor; `relative` has factor 1
 * @source  n_A = n_S (I_A/N_A) / (I_S/N_S): Westwood et al., BIPM Rapport 2018/04, Eq. 1
 */
export function standardScale(method: Method, runFile: RunFile, standardArea: { value: number; u: number } | undefined): Scale {
  const relative: Scale = { unit: 'relative', factor: 1, relativeU: 0 };
  const standard = method.species.find(({ role }) => role === 'internal-standard');
  if (!standard || !standardArea || !(standardArea.value > 0)) return relative;
  const areaU = standardArea.u / standardArea.value;
  const massFraction = runFile.standardMassFraction ?? standard.massFraction;
  const { sampleMassMg, standardMassMg } = runFile;
  if (
    sampleMassMg !== undefined &&
    standardMassMg !== undefined &&
    massFraction !== undefined &&
    standard.molarMass !== undefined
  ) {
    const molesMmol = (standardMassMg / standard.molarMass) * massFraction;
    const relativeU = Math.hypot(
      areaU,
      (runFile.standardMassUMg ?? 0) / standardMassMg,
      (runFile.sampleMassUMg ?? 0) / sampleMassMg,
      (runFile.standardMassFractionU ?? standard.massFractionU ?? 0) / massFraction,
      (standard.molarMassU ?? 0) / standard.molarMass,
    );
    return { unit: 'mmol/g', factor: molesMmol / (sampleMassMg / 1000) / standardArea.value, relativeU };
  }
  if (standard.concentrationMolPerL !== undefined) {
    const relativeU = Math.hypot(areaU, (standard.concentrationMolPerLU ?? 0) / standard.concentrationMolPerL);
    return { unit: 'mol/L', factor: standard.concentrationMolPerL / standardArea.value, relativeU };
  }
  return relative;
}
