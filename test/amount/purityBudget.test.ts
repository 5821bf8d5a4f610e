import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { budgetOf } from '../../src/amount/budgetOf.js';
import { coverageFactorOf } from '../../src/amount/coverageFactorOf.js';
import { purityBudget } from '../../src/amount/purityBudget.js';
import { saturationOf } from '../../src/amount/saturationOf.js';

/** Source: BIPM Rapports 2018/01 to 2019/04 (Westwood et al.), uncertainty-budget tables, as published. */
const rows = readFileSync(join(import.meta.dirname, '..', 'reference', 'purity-examples.csv'), 'utf8')
  .trim()
  .split('\n')
  .slice(1)
  .map((line) => line.match(/("([^"]*)"|[^,]*)(,|$)/g)!.map((cell) => cell.replace(/,$/, '').replace(/^"|"$/g, '')));

describe('purityBudget against the eleven published budgets', () => {
  for (const row of rows) {
    const n = (index: number) => Number(row[index]);
    const pair = (index: number) => ({ value: n(index), u: n(index + 1) });
    it(`recomputes ${row[0]}: ${row[1]}`, () => {
      const budget = purityBudget({
        ratio: pair(2),
        nucleiAnalyte: pair(4),
        nucleiStandard: pair(6),
        molarMassAnalyte: pair(8),
        molarMassStandard: pair(10),
        massSample: pair(12),
        massStandard: pair(14),
        purityStandard: pair(16),
      });
      // Tolerances 2e-4 and 2e-5: the printed ratios carry four decimals.
      expect(Math.abs(budget.result.value - n(18))).toBeLessThan(2e-4);
      expect(Math.abs(budget.result.u - n(19))).toBeLessThan(2e-5);
    });
  }

  it('gives the sensitivities that the first budget prints', () => {
    // Source: BIPM Rapport 2018/01, T5: dW/dR = 0.181587363, dW/dm_A = -0.284427197, dW/dw_S = 0.997785973.
    const [row] = rows;
    const pair = (index: number) => ({ value: Number(row![index]), u: Number(row![index + 1]) });
    const { lines } = purityBudget({
      ratio: pair(2),
      nucleiAnalyte: pair(4),
      nucleiStandard: pair(6),
      molarMassAnalyte: pair(8),
      molarMassStandard: pair(10),
      massSample: pair(12),
      massStandard: pair(14),
      purityStandard: pair(16),
    });
    const sensitivity = (quantity: string) => lines.find((line) => line.quantity === quantity)!.sensitivity;
    expect(sensitivity('ratio of areas')).toBeCloseTo(0.18159, 4);
    expect(sensitivity('mass of the sample')).toBeCloseTo(-0.28443, 4);
    expect(sensitivity('purity of the standard')).toBeCloseTo(0.99779, 4);
  });
});

it('finds the effective degrees of freedom of the end gauge', () => {
  // Source: JCGM 100:2008, H.1.6: contributions 25 (18), 9.7 (25.6), 2.9 (50), 16.6 (2) nm; u = 32 nm, effective degrees of freedom 16.
  const inputs = [
    [25, 18],
    [9.7, 25.6],
    [2.9, 50],
    [16.6, 2],
  ] as const;
  // A product whose factors are 1 adds relative uncertainties as the sum adds these.
  const budget = budgetOf(
    inputs.map(([u, degreesOfFreedom], index) => ({
      quantity: `x${index}`,
      value: 1,
      u: u * 1e-9,
      unit: '1',
      power: 1 as const,
      degreesOfFreedom,
    })),
  );
  expect(budget.result.u * 1e9).toBeCloseTo(32, 0);
  expect(Math.floor(budget.effectiveDegreesOfFreedom!)).toBe(16);
});

it('gives the coverage factors of the published tables', () => {
  // Source: JCGM 100:2008, Table G.2, 95 %: 2.78 (4), 2.23 (10), 2.09 (20), 1.960 (infinite).
  expect(coverageFactorOf(4)).toBeCloseTo(2.776, 2);
  expect(coverageFactorOf(10)).toBeCloseTo(2.228, 3);
  expect(coverageFactorOf(20)).toBeCloseTo(2.086, 3);
  expect(coverageFactorOf(undefined)).toBeCloseTo(1.96, 3);
});

it('computes the saturation of a pulse train', () => {
  // Source: shared worked examples 5.6 (derived): 90 degrees at 3, 5, 7, 10 T1; 30 degrees at 3 T1.
  expect([3, 5, 7, 10].map((ratio) => saturationOf(ratio, 1, 90))).toEqual(
    [0.950213, 0.993262, 0.999088, 0.9999546].map((value) => expect.closeTo(value, 6)),
  );
  expect(saturationOf(3, 1, 30)).toBeCloseTo(0.993029, 6);
});
