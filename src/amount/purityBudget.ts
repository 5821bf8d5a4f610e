import type { Quantity } from '../base/quantity.js';
import type { Budget } from './amounts.js';
import { budgetOf, type Factor } from './budgetOf.js';

/** What a purity by internal standard is made of; masses in mg, molar masses in g/mol. */
export interface PurityInputs {
  /** Area of the analyte's signals over that of the standard's. */
  readonly ratio: Quantity & { readonly degreesOfFreedom?: number };
  readonly nucleiAnalyte: Quantity;
  readonly nucleiStandard: Quantity;
  readonly molarMassAnalyte: Quantity;
  readonly molarMassStandard: Quantity;
  readonly massSample: Quantity;
  readonly massStandard: Quantity;
  readonly purityStandard: Quantity;
}

/**
 * Mass fraction by internal standard, with its budget: w = R (N_S/N_A) (M_A/M_S) (m_S/m_A) w_S.
 *
 * @returns mass fraction in g/g
 * @source Westwood et al., BIPM Rapport 2018/04 (ISRD-02), Eq. 1
 */
export function purityBudget(inputs: PurityInputs): Budget {
  const factor = (quantity: string, of: Quantity, unit: string, power: 1 | -1): Factor => ({
    quantity,
    value: of.value,
    u: of.u,
    unit,
    power,
  });
  const { degreesOfFreedom } = inputs.ratio;
  return budgetOf([
    { ...factor('ratio of areas', inputs.ratio, '1', 1), ...(degreesOfFreedom !== undefined ? { degreesOfFreedom } : {}) },
    factor('nuclei of the analyte', inputs.nucleiAnalyte, '1', -1),
    factor('nuclei of the standard', inputs.nucleiStandard, '1', 1),
    factor('molar mass of the analyte', inputs.molarMassAnalyte, 'g/mol', 1),
    factor('molar mass of the standard', inputs.molarMassStandard, 'g/mol', -1),
    factor('mass of the sample', inputs.massSample, 'mg', -1),
    factor('mass of the standard', inputs.massStandard, 'mg', 1),
    factor('purity of the standard', inputs.purityStandard, 'g/g', 1),
  ]);
}
