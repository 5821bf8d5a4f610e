import { describe, expect, it } from 'vitest';
import { feedRounds } from '../fault/feedRounds.js';
import { killRounds } from '../fault/killRounds.js';
import { randomFaults } from '../fault/randomFaults.js';

/**
 * The long rounds. `KINETRAIL_SOAK_KILLS` (200) and `KINETRAIL_SOAK_MINUTES` (30) shorten them; `KINETRAIL_SOAK_SEED` repeats
 * one. The seed and the figures are printed.
 */
const kills = Number(process.env.KINETRAIL_SOAK_KILLS ?? 200);
const minutes = Number(process.env.KINETRAIL_SOAK_MINUTES ?? 30);
const seed = Number(process.env.KINETRAIL_SOAK_SEED ?? Date.now() % 1_000_000_007);

describe(`soak, seed ${seed}`, () => {
  it(`F01: ${kills} kills lose, repeat and change nothing`, async () => {
    const figures = await killRounds(kills, seed);
    console.log(`seed ${seed}: ${JSON.stringify(figures)}`);
    expect(figures).toMatchObject({ lost: 0, duplicated: 0, differing: 0, verifyFailures: [], shareChanged: false });
  });

  it('500 time points fed slowly, in bursts and out of order, with 100 kills, end as a quiet pass', async () => {
    const figures = await feedRounds(500, 100, seed, 60_000);
    console.log(`seed ${seed}: ${JSON.stringify(figures)}`);
    expect(figures).toMatchObject({ lost: 0, duplicated: 0, differing: 0, verifyFailures: [], shareChanged: false });
    expect(figures.kills).toBeGreaterThanOrEqual(100);
  });

  it(`${minutes} minutes of random faults lose, repeat and change nothing`, async () => {
    const figures = await randomFaults(minutes * 60_000, seed);
    console.log(`seed ${seed}: ${JSON.stringify(figures)}`);
    expect(figures.violations).toEqual([]);
    expect(figures.faults).toBeGreaterThan(minutes * 100);
  });
});
