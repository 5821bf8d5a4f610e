import fc from 'fast-check';
import { expect, it } from 'vitest';
import { canonicalJson } from '../../src/base/canonicalJson.js';
import { InvariantError } from '../../src/base/result.js';

it('gives the form of RFC 8785, section 3.2.2 and 3.2.3 (sorted keys, shortest numbers)', () => {
  // Source: RFC 8785, sample of section 3.2.2 without the string that holds control characters.
  // biome-ignore lint/correctness/noPrecisionLoss: the RFC's own sample shows that the number is written shortest
  const sample = { numbers: [333333333.33333329, 1e30, 4.5, 2e-3, 1e-27], literals: [null, true, false] };
  expect(canonicalJson(sample)).toBe('{"literals":[null,true,false],"numbers":[333333333.3333333,1e+30,4.5,0.002,1e-27]}');
});

it('does not depend on the order in which keys were set', () => {
  fc.assert(
    fc.property(fc.dictionary(fc.string(), fc.integer()), (value) => {
      const reversed = Object.fromEntries(Object.entries(value).reverse());
      expect(canonicalJson(reversed)).toBe(canonicalJson(value));
      expect(JSON.parse(canonicalJson(value))).toEqual(JSON.parse(JSON.stringify(value)));
    }),
  );
});

it('refuses a number that JSON has no form for', () => {
  expect(() => canonicalJson({ a: Number.NaN })).toThrow(InvariantError);
});
