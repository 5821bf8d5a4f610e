import { expect, it } from 'vitest';
import { randomFaults } from './randomFaults.js';

/** Seeds that once found something are kept here. */
const keptSeeds: number[] = [20271501, 20280390, 20281217];

it('random faults, kills and power cuts lose, repeat and change nothing', { timeout: 120_000 }, async () => {
  const figures = await randomFaults(60_000, 20270115, 150);
  expect(figures.violations).toEqual([]);
  expect(figures.faults).toBeGreaterThan(100);
  for (const seed of keptSeeds) expect((await randomFaults(60_000, seed, 1)).violations).toEqual([]);
});
