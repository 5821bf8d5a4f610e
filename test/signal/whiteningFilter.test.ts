import { describe, expect, it } from 'vitest';
import { whiteningFilter } from '../../src/signal/whiteningFilter.js';

describe('whiteningFilter', () => {
  it('leaves white noise as it is', () => {
    const { filter, remaining } = whiteningFilter(Float64Array.of(1));
    expect([...filter].map((tap) => Math.round(tap * 100) / 100)).toEqual([expect.closeTo(1, 1)]);
    expect([...remaining]).toEqual([1]);
  });

  it('turns noise of exponential correlation into nearly white noise with two taps that matter', () => {
    // An autoregressive process of first order has r(k) = a^k and the whitening filter (1, -a) / sqrt(1 - a^2) (textbook).
    const a = 0.6;
    const { filter, remaining } = whiteningFilter(Float64Array.from({ length: 30 }, (_, lag) => a ** lag));
    expect(filter[1]! / filter[0]!).toBeCloseTo(-a, 1);
    for (let lag = 1; lag < remaining.length; lag += 1) expect(Math.abs(remaining[lag]!)).toBeLessThan(0.08);
  });

  it('stays finite when the correlation was cut off before it died out', () => {
    const { filter } = whiteningFilter(Float64Array.from({ length: 6 }, (_, lag) => 0.98 ** lag));
    expect([...filter].every(Number.isFinite)).toBe(true);
  });
});
