import type { Flag } from '../base/flag.js';
import type { Quantity } from '../base/quantity.js';
import type { Method, RunFile } from '../method/method.js';
import type { Budget } from './amounts.js';
import { purityBudget } from './purityBudget.js';

const massMgMin = 0.05;
const massMgMax = 2000;

/**
 * Purity of the method's species by internal standard, or the reasons why it cannot be stated: never a silent number.
 *
 * @param relative area per nucleus by species id
 */
export function purityOf(
  method: Method,
  runFile: RunFile,
  relative: ReadonlyMap<string, Quantity>,
): { budget?: Budget; flags: Flag[] } {
  if (!method.purity) return { flags: [] };
  const analyte = method.species.find(({ id }) => id === method.purity!.of)!;
  const standard = method.species.find(({ role }) => role === 'internal-standard');
  const missing = missingOf(method, runFile);
  if (missing.length > 0 || !standard) {
    return {
      flags: [{ code: 'purity-not-stated', message: `purity is not stated: ${missing.join(', ')} missing`, weight: 'note' }],
    };
  }
  const [area, standardArea] = [relative.get(analyte.id), relative.get(standard.id)];
  if (!area || !standardArea || !(standardArea.value > 0)) {
    return {
      flags: [{ code: 'purity-not-stated', message: 'purity is not stated: the analyte or the standard was not measured' }],
    };
  }
  const value = area.value / standardArea.value;
  const u = Math.hypot(area.u / standardArea.value, (value * standardArea.u) / standardArea.value);
  const budget = purityBudget({
    // The areas are per nucleus already: the counts stand in the budget as one.
    ratio: { value, u },
    nucleiAnalyte: { value: 1, u: 0 },
    nucleiStandard: { value: 1, u: 0 },
    molarMassAnalyte: { value: analyte.molarMass!, u: analyte.molarMassU ?? 0 },
    molarMassStandard: { value: standard.molarMass!, u: standard.molarMassU ?? 0 },
    massSample: { value: runFile.sampleMassMg!, u: runFile.sampleMassUMg ?? 0 },
    massStandard: { value: runFile.standardMassMg!, u: runFile.standardMassUMg ?? 0 },
    purityStandard: {
      value: (runFile.standardMassFraction ?? standard.massFraction)!,
      u: runFile.standardMassFractionU ?? standard.massFractionU ?? 0,
    },
  });
  return { budget, flags: massFlags(runFile, budget) };
}

function missingOf(method: Method, runFile: RunFile): string[] {
  const standard = method.species.find(({ role }) => role === 'internal-standard');
  const analyte = method.species.find(({ id }) => id === method.purity?.of);
  const needs: readonly (readonly [unknown, string])[] = [
    [standard, 'an internal standard in the method'],
    [runFile.sampleMassMg, 'sample_mass_mg'],
    [runFile.standardMassMg, 'standard_mass_mg'],
    [runFile.standardMassFraction ?? standard?.massFraction, 'the purity of the standard (mass_fraction)'],
    [standard?.molarMass, 'the molar mass of the standard'],
    [analyte?.molarMass, 'the molar mass of the analyte'],
  ];
  return needs.filter(([value]) => value === undefined).map(([, name]) => name);
}

/** Grams typed for milligrams, or the like, show as masses or purities that cannot be. */
function massFlags({ sampleMassMg = 1, standardMassMg = 1 }: RunFile, budget: Budget): Flag[] {
  const flags: Flag[] = [];
  for (const [name, mass] of [
    ['sample', sampleMassMg],
    ['standard', standardMassMg],
  ] as const) {
    if (mass < massMgMin || mass > massMgMax)
      flags.push({
        code: 'mass-implausible',
        message: `the mass of the ${name}, ${mass} mg, is unusual; was it meant in another unit?`,
      });
  }
  const { value, u } = budget.result;
  if (value - 3 * u > 1.02)
    flags.push({
      code: 'purity-above-one',
      message: `the mass fraction comes out at ${value.toFixed(3)}, above 1: check masses, purity of the standard and overlaps`,
    });
  return flags;
}
