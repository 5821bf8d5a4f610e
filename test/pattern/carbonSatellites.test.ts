import { describe, expect, it } from 'vitest';
import { usualOneBondHz, withCarbonSatellites } from '../../src/pattern/carbonSatellites.js';

describe('withCarbonSatellites', () => {
  it('puts 0.535 % of each line half a coupling to either side and keeps the total', () => {
    const lines = withCarbonSatellites([{ offsetHz: 0, share: 1 }], 142);
    expect(lines.map(({ offsetHz }) => offsetHz)).toEqual([71, 0, -71]);
    for (const [index, share] of [0.00535, 0.9893, 0.00535].entries()) expect(lines[index]!.share).toBeCloseTo(share, 12);
    const doublet = withCarbonSatellites(
      [
        { offsetHz: 4, share: 0.5 },
        { offsetHz: -4, share: 0.5 },
      ],
      126,
    );
    expect(doublet.map(({ offsetHz }) => offsetHz)).toEqual([67, 59, 4, -4, -59, -67]);
    expect(doublet.reduce((sum, { share }) => sum + share, 0)).toBeCloseTo(1, 12);
  });
});

describe('usualOneBondHz', () => {
  // Common practice: one-bond couplings grow with the s character of carbon and with oxygen on it.
  it.each([
    [1.2, 126],
    [3.7, 143],
    [7.3, 160],
    [9.8, 175],
  ])('is for a proton at %d ppm %d Hz', (shiftPpm, couplingHz) => expect(usualOneBondHz(shiftPpm)).toBe(couplingHz));
});
