/**
 * Runs test: the probability of so few runs of equal sign if the residuals were independent.
 *
 * @param residuals shape (n)
 * @returns one-sided p by the normal approximation; 1 when there are too few of either sign
 * @source Wald, Wolfowitz, Ann. Math. Stat. 1940, 11, 147
 */
export function runTest(residuals: readonly number[]): number {
  const signs = residuals.filter((value) => value !== 0).map((value) => value > 0);
  const positive = signs.filter(Boolean).length;
  const negative = signs.length - positive;
  if (positive < 3 || negative < 3) return 1;
  const runs = signs.filter((sign, index) => index === 0 || sign !== signs[index - 1]).length;
  const n = signs.length;
  const mean = 1 + (2 * positive * negative) / n;
  const variance = ((mean - 1) * (mean - 2)) / (n - 1);
  return normalBelow((runs + 0.5 - mean) / Math.sqrt(variance));
}

/** @source Abramowitz, Stegun 1964, 26.2.17: error below 7.5e-8 */
export function normalBelow(z: number): number {
  const t = 1 / (1 + 0.2316419 * Math.abs(z));
  const tail =
    (Math.exp((-z * z) / 2) / Math.sqrt(2 * Math.PI)) *
    t *
    (0.31938153 + t * (-0.356563782 + t * (1.781477937 + t * (-1.821255978 + t * 1.330274429))));
  return z > 0 ? 1 - tail : tail;
}
