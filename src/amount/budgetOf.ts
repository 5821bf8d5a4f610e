import type { Budget, BudgetLine } from './amounts.js';
import { coverageFactorOf } from './coverageFactorOf.js';

/** One input quantity of a product model. */
export interface Factor {
  readonly quantity: string;
  readonly value: number;
  readonly u: number;
  readonly unit: string;
  /** +1: a factor; -1: a divisor. */
  readonly power: 1 | -1;
  readonly degreesOfFreedom?: number;
}

/**
 * Uncertainty budget of a product of powers: y = x1^p1 x2^p2 ...
 *
 * @param factors independent inputs, values not zero
 * @returns result, one line an input with sensitivity p y / x, effective degrees of freedom, coverage factor for 95 %
 * @source JCGM 100:2008, 5.1.6 (relative variances add), G.4.1 (Welch and Satterthwaite); checked against the published budgets of
 *         the BIPM Rapports 2018/01 to 2019/04
 */
export function budgetOf(factors: readonly Factor[]): Budget {
  const value = factors.reduce((product, factor) => product * factor.value ** factor.power, 1);
  const lines: BudgetLine[] = factors.map(({ quantity, value: x, u, unit, power, degreesOfFreedom }) => {
    const sensitivity = (power * value) / x;
    const freedom = degreesOfFreedom !== undefined ? { degreesOfFreedom } : {};
    return { quantity, value: x, u, unit, sensitivity, contribution: Math.abs(sensitivity) * u, ...freedom };
  });
  const u = Math.sqrt(lines.reduce((sum, { contribution }) => sum + contribution ** 2, 0));
  const bound = lines.reduce(
    (sum, { contribution, degreesOfFreedom }) =>
      sum + (degreesOfFreedom !== undefined ? contribution ** 4 / degreesOfFreedom : 0),
    0,
  );
  const effective = bound > 0 ? u ** 4 / bound : undefined;
  const coverageFactor = coverageFactorOf(effective);
  return {
    result: { value, u },
    lines,
    ...(effective !== undefined ? { effectiveDegreesOfFreedom: effective } : {}),
    coverageFactor,
    expandedU: coverageFactor * u,
  };
}
