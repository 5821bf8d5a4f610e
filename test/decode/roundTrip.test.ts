import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { TableForm } from '../../src/simulate/encodeTable.js';
import { writeJcamp } from '../../src/simulate/writeJcamp.js';
import { decoded, fidFields, fidText, spectrumFields, spectrumText } from './sampleFile.js';

const forms: TableForm[] = ['AFFN', 'PAC', 'SQZ', 'DIF', 'DIFDUP'];
const lineEnds = ['\n', '\r\n', '\r'] as const;
const cases = forms.flatMap((form) => lineEnds.map((lineEnd) => ({ form, lineEnd })));

describe('what writeJcamp writes', () => {
  it.each(cases)('decodes to the same FID and the same hash as $form with $lineEnd', (options) => {
    const { real, imag, dwellS, flags, dataSha256, acquired } = decoded(fidText(options));
    expect([real, imag, dwellS, flags]).toEqual([fidFields.real, fidFields.imag, fidFields.dwellS, []]);
    expect(acquired).toBe('2026-03-14T19:31:00Z');
    expect(dataSha256).toBe(decoded(fidText()).dataSha256);
  });

  it.each(cases)('decodes to the same spectrum as $form with $lineEnd, from either end', (options) => {
    const forward = decoded(spectrumText(options));
    const backward = decoded(spectrumText({ ...options, reversed: true }));
    expect([forward.real, forward.flags, backward.flags]).toEqual([spectrumFields.real, [], []]);
    expect(backward.real).toEqual(Float64Array.from(forward.real).reverse());
    expect(forward.axis).toEqual({ firstPpm: 4801.56 / 400.13, lastPpm: -800.26 / 400.13 });
    expect(backward.axis).toEqual({ firstPpm: -800.26 / 400.13, lastPpm: 4801.56 / 400.13 });
  });

  it('decodes whole ordinates of any size in every form', () => {
    const ordinate = fc.oneof(fc.integer({ min: -9, max: 9 }), fc.integer({ min: -(2 ** 31), max: 2 ** 31 - 1 }));
    const runs = fc.array(fc.tuple(ordinate, fc.integer({ min: 1, max: 40 })), { minLength: 2, maxLength: 40 });
    fc.assert(
      fc.property(runs, fc.constantFrom(...forms), fc.constantFrom(...lineEnds), (pairs, form, lineEnd) => {
        const real = Float64Array.from(pairs.flatMap(([value, count]) => Array<number>(count).fill(value)));
        const imag = Float64Array.from(real, (value, k) => (value === 0 ? 0 : -value) + (k % 3));
        fc.pre(imag.every((value) => Math.abs(value) <= 2 ** 31));
        const read = decoded(writeJcamp({ ...fidFields, real, imag }, { form, lineEnd }));
        expect([read.real, read.imag, read.flags]).toEqual([real, imag, []]);
      }),
      { numRuns: 200, seed: 20260314 },
    );
  });

  it('decodes scaled ordinates within half a unit', () => {
    const real = Float64Array.from({ length: 500 }, (_, k) => Math.sin(k) * 1e-3);
    for (const form of forms) {
      const read = decoded(writeJcamp({ ...spectrumFields, real }, { form, integerMax: 1e6 }));
      expect(read.flags).toEqual([]);
      read.real.forEach((value, k) => {
        expect(Math.abs(value - real[k]!)).toBeLessThanOrEqual(0.5001e-9);
      });
    }
  });
});
