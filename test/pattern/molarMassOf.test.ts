import { describe, expect, it } from 'vitest';
import { molarMassOf } from '../../src/pattern/molarMassOf.js';

function massOf(smiles: string) {
  const found = molarMassOf(smiles);
  if (!found.ok) throw new Error(found.problem.message);
  return found.value;
}

describe('molarMassOf', () => {
  // Source: shared table of internal standards (BIPM Rapports 2018/01, 2018/04 and 2018/05; published).
  it.each([
    ['maleic acid', 'OC(=O)/C=C\\C(O)=O', 'C4H4O4', 116.072, 0.0025, 0.0001],
    ['dimethyl sulfone', 'CS(C)(=O)=O', 'C2H6O2S', 94.128, 0.005, 0.0005],
    ['potassium hydrogen phthalate', '[K+].OC(=O)c1ccccc1C([O-])=O', 'C8H5KO4', 204.222, 0.004, 0.001],
  ])('gives %s its published molar mass and uncertainty', (_, smiles, formula, molarMass, u, tolerance) => {
    const found = massOf(smiles);
    expect(found.formula).toBe(formula);
    expect(Math.abs(found.molarMass - molarMass)).toBeLessThan(0.0011);
    expect(Math.abs(found.molarMassU - u)).toBeLessThan(tolerance);
  });

  // Source: shared contract, example method (benzyl alcohol 108.14).
  it('gives benzyl alcohol 108.14 g/mol', () => expect(massOf('OCc1ccccc1').molarMass).toBeCloseTo(108.14, 2));

  it('counts deuterium and other named isotopes by their own mass', () => {
    expect(massOf('[2H]C(Cl)(Cl)Cl')).toMatchObject({ formula: 'CCl3D' });
    expect(massOf('[2H]C(Cl)(Cl)Cl').molarMass).toBeCloseTo(120.375, 3);
    expect(massOf('[13CH4]').molarMass).toBeCloseTo(17.035, 3);
  });

  it.each([
    ['', 'smiles-unreadable'],
    ['C(C', 'smiles-unreadable'],
    ['CC)', 'smiles-unreadable'],
    ['C1CC', 'smiles-unreadable'],
    ['CC*', 'smiles-unreadable'],
    ['Xx', 'smiles-unreadable'],
    ['not a structure', 'smiles-unreadable'],
    ['CC.', 'smiles-unreadable'],
    ['C(C)(C)(C)(C)C', 'smiles-valence'],
    ['C'.repeat(301), 'smiles-too-large'],
    ['C'.repeat(2001), 'smiles-too-large'],
    ['[U]', 'molar-mass-unknown'],
  ])('refuses %j with %s', (smiles, code) => {
    const found = molarMassOf(smiles);
    expect(found.ok ? found.value.formula : found.problem.code).toBe(code);
  });
});
