/**
 * Coverage factor for 95 %: the 0.975 quantile of Student's t, 1.96 without a bound on the degrees of freedom.
 *
 * @param degreesOfFreedom effective degrees of freedom; absent: infinite
 * @source Abramowitz, Stegun 1964, 26.7.5 (expansion about the normal quantile), within 1e-3 from 3 degrees of freedom on
 */
export function coverageFactorOf(degreesOfFreedom: number | undefined): number {
  const z = 1.959963985;
  if (degreesOfFreedom === undefined) return z;
  const n = Math.max(1, degreesOfFreedom);
  if (n < 3) return n < 2 ? 12.706 : 4.303;
  const [z3, z5, z7] = [z ** 3, z ** 5, z ** 7];
  const g1 = (z3 + z) / 4;
  const g2 = (5 * z5 + 16 * z3 + 3 * z) / 96;
  const g3 = (3 * z7 + 19 * z5 + 17 * z3 - 15 * z) / 384;
  const g4 = (79 * z ** 9 + 776 * z7 + 1482 * z5 - 1920 * z3 - 945 * z) / 92_160;
  return z + g1 / n + g2 / n ** 2 + g3 / n ** 3 + g4 / n ** 4;
}
