import { describe, expect, it } from 'vitest';
import { deriveAmounts } from '../../src/amount/deriveAmounts.js';
import { judgeLimits } from '../../src/amount/judgeLimits.js';
import type { Measurement } from '../../src/signal/measured.js';
import { makeRandom } from '../../src/simulate/random.js';
import { testMethod } from '../series/buildPoints.js';

const method = testMethod(`kinetrail: method/1
title: A to 2 B with standard
version: "1"
nucleus: 1H
reference: {signal: tetramethylsilane}
species:
  - {id: a, role: starting-material, molar_mass: 100, signals: [{id: x, listed: "5.0 (s, 2H)"}, {id: y, listed: "4.5 (s, 3H)"}]}
  - {id: b, role: product, molar_mass: 180.158, stoichiometry: 2, signals: [{id: x, listed: "4.0 (s, 3H)"}]}
  - {id: s, role: internal-standard, molar_mass: 116.072, mass_fraction: 0.999, signals: [{id: x, listed: "6.2 (s, 2H)"}]}
conversion: {of: a, to: b}
limits: [{species: a, quantity: mole-fraction, at_most: 0.02}]
purity: {of: b, at_least: 0.95}
`);

function measurement(areas: Readonly<Record<string, readonly [area: number, u: number]>>): Measurement {
  const nuclei: Record<string, number> = { 'a/x': 2, 'a/y': 3, 'b/x': 3, 's/x': 2 };
  const signals = Object.entries(areas).map(([key, [area, u]]) => ({
    key,
    species: key[0]!,
    use: 'quantify' as const,
    nuclei: nuclei[key]!,
    shiftPpm: 5,
    widthHz: 1,
    area,
    u,
    u0: u,
    verdict: 'matches' as const,
    declared: 's',
    fittedWith: [],
    words: '',
  }));
  return {
    signals,
    unassigned: [],
    solvents: [],
    signalToNoise: 100,
    lineShape: { widthHz: 1, lorentzShare: 1, asymmetry: 0 },
    flags: [],
  };
}

describe('deriveAmounts', () => {
  it('counts stoichiometry: two moles of product stand for one mole converted', () => {
    const amounts = deriveAmounts(measurement({ 'a/x': [1, 0.001], 'a/y': [1.5, 0.001], 'b/x': [3, 0.001] }), method, {});
    // a = 0.5, b = 1: conversion = (1/2) / (0.5 + 1/2).
    expect(amounts.conversion!.value).toBeCloseTo(0.5, 12);
    expect(amounts.unit).toBe('relative');
  });

  it('widens u by the disagreement of the signals of one species, and says how far they disagree', () => {
    const agreeing = deriveAmounts(measurement({ 'a/x': [2, 0.02], 'a/y': [3, 0.03] }), method, {}).species.a!;
    const differing = deriveAmounts(measurement({ 'a/x': [2, 0.02], 'a/y': [3.3, 0.03] }), method, {}).species.a!;
    expect(agreeing.agreement).toBeCloseTo(0, 9);
    expect(differing.agreement!).toBeGreaterThan(20);
    expect(differing.u / agreeing.u).toBeCloseTo(Math.sqrt(differing.agreement!), 6);
  });

  it('recomputes the mass fraction of the worked smoke example', () => {
    // Derived (shared worked examples, section 1): 1.92 (2/3) (180.158/116.072) (10/20) 0.999 = 0.992365 g/g.
    const amounts = deriveAmounts(measurement({ 'b/x': [1.92, 0.001], 's/x': [1, 0.001] }), method, {
      sampleMassMg: 20,
      standardMassMg: 10,
    });
    expect(amounts.purity!.result.value).toBeCloseTo(0.992365, 5);
    expect(amounts.unit).toBe('mmol/g');
    // mmol of b per g of sample = mass fraction / molar mass.
    expect(amounts.species.b!.amount).toBeCloseTo(992.365 / 180.158, 3);
  });

  it('never states a purity in silence: what is missing is named, what cannot be is flagged', () => {
    const data = measurement({ 'b/x': [1.92, 0.001], 's/x': [1, 0.001] });
    const without = deriveAmounts(data, method, { sampleMassMg: 20 });
    expect(without.purity).toBeUndefined();
    expect(without.flags[0]).toMatchObject({
      code: 'purity-not-stated',
      message: expect.stringContaining('standard_mass_mg') as string,
    });
    const grams = deriveAmounts(data, method, { sampleMassMg: 0.02, standardMassMg: 10 });
    expect(grams.flags.map(({ code }) => code)).toEqual(['mass-implausible', 'purity-above-one']);
  });

  it('covers: 95 % of conversions lie within 2 u of the truth (seed 5, 4000 draws)', () => {
    const random = makeRandom(5);
    let covered = 0;
    for (let k = 0; k < 4000; k += 1) {
      const draw = (area: number, u: number) => [area + u * random.normal(), u] as const;
      const { conversion } = deriveAmounts(measurement({ 'a/y': draw(1.5, 0.06), 'b/x': draw(3, 0.06) }), method, {});
      if (Math.abs(conversion!.value - 0.5) <= 2 * conversion!.u) covered += 1;
    }
    // 2 u of a normal error: 95.45 %; three binomial standard deviations are 1 %.
    expect(covered / 4000).toBeGreaterThan(0.944);
    expect(covered / 4000).toBeLessThan(0.965);
  });
});

describe('judgeLimits', () => {
  const verdictAt = (a: number, u: number) =>
    judgeLimits(deriveAmounts(measurement({ 'a/x': [2 * a, 2 * u], 'b/x': [3 * (1 - a), 1e-6] }), method, {}), method)[0]!
      .verdict;

  it('passes or fails only when the limit lies outside the 95 % interval', () => {
    expect(verdictAt(0.01, 0.001)).toBe('pass');
    expect(verdictAt(0.019, 0.001)).toBe('not-decided');
    expect(verdictAt(0.021, 0.001)).toBe('not-decided');
    expect(verdictAt(0.03, 0.001)).toBe('fail');
  });
});
