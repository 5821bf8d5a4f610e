import { describe, expect, it } from 'vitest';
import { deriveSeries } from '../../src/series/deriveSeries.js';
import { fitLaws } from '../../src/series/fitKinetics.js';
import { laws } from '../../src/series/laws/index.js';
import { makeRandom } from '../../src/simulate/random.js';
import { seriesInputs, testMethod } from './buildPoints.js';

const method = testMethod();
const law = (name: string) => laws.find((entry) => entry.name === name)!;

/** Turns a published concentration series into conversions. */
function asConversion(t: readonly number[], c: readonly number[], relativeU: number) {
  return { t, x: c.map((value) => 1 - value / c[0]!), u: c.map((value) => (relativeU * value) / c[0]!) };
}

describe('rate laws on published examples', () => {
  it('finds first order and its constant for sulfuryl chloride', () => {
    // Source: OpenStax Chemistry 2e, 12.4: k = 2.20e-5 s^-1, first order.
    const data = asConversion([0, 5e3, 1e4, 1.5e4, 2.5e4, 3e4, 4e4], [0.1, 0.0896, 0.0802, 0.0719, 0.0577, 0.0517, 0.0415], 5e-4);
    const best = fitLaws(data, ['zero-order', 'first-order', 'second-order'])[0]!;
    expect(best.law.name).toBe('first-order');
    expect(best.fit.parameters[0]).toBeCloseTo(2.2e-5, 7);
  });

  it('finds second order for the dimerisation of butadiene and rejects first', () => {
    // Source: OpenStax Chemistry 2e, 12.4: k = 0.0614 M^-1 s^-1 with c0 = 0.0100 M, so k c0 = 6.14e-4 s^-1.
    const data = asConversion([0, 1600, 3200, 4800, 6200], [1e-2, 5.04e-3, 3.37e-3, 2.53e-3, 2.08e-3], 2e-3);
    const fits = fitLaws(data, ['zero-order', 'first-order', 'second-order']);
    expect(fits[0]!.law.name).toBe('second-order');
    expect(fits[0]!.weight).toBeGreaterThan(0.99);
    expect(fits[0]!.fit.parameters[0]).toBeCloseTo(6.14e-4, 5);
  });

  it('reproduces the analytic curves', () => {
    // Derived, exact: A + B -> P with k 0.2, A0 0.1, B0 0.15: A(60) = 0.0288487; reversible kf 0.03, kr 0.01: A(25) = 0.525910;
    // autocatalytic k 0.05, A0 1, B0 0.01: A(100) = 0.394497.
    expect(1 - law('second-order-unequal').value([0.2 * 0.1, 0, 0.5], 60)).toBeCloseTo(0.288487, 6);
    expect(1 - law('reversible').value([0.04, 0, 0.75], 25)).toBeCloseTo(0.52591, 6);
    expect(1 - law('autocatalytic').value([0.05, 0, 0.01], 100)).toBeCloseTo(0.394497, 6);
  });
});

it('refuses to name a law when early data do not decide', () => {
  const data = Array.from({ length: 10 }, (_, index) => [index * 600, 1 - Math.exp(-5e-5 * index * 600)] as const);
  const { kinetics } = deriveSeries(seriesInputs(method, data, 0.004));
  expect(kinetics!.model).toBeUndefined();
  expect(kinetics!.words).toMatch(/do not decide/);
});

describe('forecast', () => {
  it('is withheld before there is enough to go by, with the reason', () => {
    const data = Array.from({ length: 6 }, (_, index) => [index * 600, 1 - Math.exp(-2e-5 * index * 600)] as const);
    const { forecast } = deriveSeries(seriesInputs(method, data, 0.002));
    expect(forecast!.elapsedS).toBeUndefined();
    expect(forecast!.words).toMatch(/withheld/);
  });

  it('covers the true end point of simulated runs at half conversion (seeds 1 to 60)', () => {
    let [covered, stated] = [0, 0];
    for (let seed = 1; seed <= 60; seed += 1) {
      const random = makeRandom(seed);
      const truth = simulatedRun(random);
      const { forecast } = deriveSeries(seriesInputs(method, truth.data, truth.u));
      if (forecast?.lowS === undefined || forecast.highS === undefined) continue;
      stated += 1;
      if (truth.endS >= forecast.lowS && truth.endS <= forecast.highS) covered += 1;
    }
    // 95 % nominal; three binomial standard deviations at 60 runs allow 87 %.
    expect(stated).toBeGreaterThan(10);
    expect(covered / stated).toBeGreaterThan(0.86);
  });
});

function simulatedRun(random: ReturnType<typeof makeRandom>) {
  const names = ['first-order', 'second-order-unequal', 'second-order'] as const;
  const name = names[random.integer(0, 2)]!;
  const k = random.between(5e-5, 3e-4);
  const parameters = name === 'second-order-unequal' ? [k, 0, random.between(0.3, 2)] : [k, 0];
  const value = (t: number) => law(name).value(parameters, t);
  let endS = 1;
  while (value(endS) < 0.98) endS *= 1.001;
  let halfS = 1;
  while (value(halfS) < 0.6) halfS *= 1.001;
  const count = random.integer(12, 30);
  const u = random.between(0.001, 0.005);
  const data = Array.from({ length: count }, (_, index) => {
    const t = (halfS * (index + 0.5)) / count;
    return [t, value(t) + u * random.normal()] as const;
  });
  return { data, u, endS };
}
