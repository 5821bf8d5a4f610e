import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import type { Acquisition } from '../../src/decode/acquisition.js';
import { decodeJcamp } from '../../src/decode/decodeJcamp.js';
import { bytesOf, decoded, fidText, fileBytes, refusal, single, spectrumText, unwrap } from './sampleFile.js';

const seed = 20260314;
const difdup = fidText();
const original = decoded(difdup);

/** Largest difference between two acquisitions, as part of the largest ordinate; infinite when they differ in kind or length. */
function difference(one: Acquisition, other: Acquisition): number {
  const channels = [
    [one.real, other.real],
    [one.imag ?? new Float64Array(0), other.imag ?? new Float64Array(0)],
  ] as const;
  if (one.kind !== other.kind || channels.some(([a, b]) => a.length !== b.length)) return Number.POSITIVE_INFINITY;
  let [worst, largest] = [0, 0];
  for (const [a, b] of channels)
    a.forEach((value, k) => {
      worst = Math.max(worst, Math.abs(value - b[k]!));
      largest = Math.max(largest, Math.abs(value));
    });
  return worst / largest;
}

/** Decodes damaged bytes; nothing may be thrown, and numbers that come out must be the original ones, within what the header can show. */
function mustBeCaughtOrUnderstood(bytes: Uint8Array, truth: Acquisition): void {
  const result = decodeJcamp(bytes, 'damaged.jdx');
  for (const block of result.ok ? result.value : []) {
    if (!block.ok) {
      expect(block.problem.message).not.toBe('');
      continue;
    }
    const isSaid = block.value.flags.length > 0;
    expect(difference(truth, block.value)).toBeLessThanOrEqual(isSaid ? 1e-4 : 1e-6);
    if (truth.dwellS !== undefined) expect(Math.abs(block.value.dwellS! / truth.dwellS - 1)).toBeLessThan(1e-5);
  }
}

const place = fc.double({ min: 0, max: 1, maxExcluded: true, noNaN: true });
const at = (bytes: Uint8Array, where: number) => Math.floor(where * bytes.length);

describe('damaged difference tables', () => {
  const whole = bytesOf(difdup);

  it('with a flipped bit are caught, or give the same numbers', () => {
    fc.assert(
      fc.property(place, fc.integer({ min: 0, max: 7 }), (where, bit) => {
        const bytes = Uint8Array.from(whole);
        bytes[at(bytes, where)]! ^= 1 << bit;
        mustBeCaughtOrUnderstood(bytes, original);
      }),
      { numRuns: 1500, seed },
    );
  });

  it('with any one digit changed are caught, or give the same numbers', () => {
    const start = difdup.indexOf('##DATA TABLE');
    const end = difdup.indexOf('##END NTUPLES');
    for (let k = start; k < end; k += 1) {
      const byte = whole[k]!;
      if (byte < 48 || byte > 57) continue;
      const bytes = Uint8Array.from(whole);
      bytes[k] = byte === 57 ? 48 : byte + 1;
      mustBeCaughtOrUnderstood(bytes, original);
    }
  });

  it('with a byte replaced, inserted or taken out are caught, or give the same numbers', () => {
    fc.assert(
      fc.property(
        place,
        fc.integer({ min: 1, max: 255 }),
        fc.constantFrom('replace', 'insert', 'remove'),
        (where, byte, what) => {
          const k = at(whole, where);
          const middle = what === 'remove' ? [] : [byte];
          const bytes = Uint8Array.from([...whole.subarray(0, k), ...middle, ...whole.subarray(what === 'insert' ? k : k + 1)]);
          mustBeCaughtOrUnderstood(bytes, original);
        },
      ),
      { numRuns: 1200, seed },
    );
  });

  it('with lines dropped, doubled or swapped are caught, or give the same numbers', () => {
    const lines = difdup.split('\n');
    for (let k = 0; k < lines.length; k += 1) {
      const dropped = lines.filter((_, index) => index !== k).join('\n');
      const doubled = lines.flatMap((line, index) => (index === k ? [line, line] : [line])).join('\n');
      mustBeCaughtOrUnderstood(bytesOf(dropped), original);
      mustBeCaughtOrUnderstood(bytesOf(doubled), original);
      for (const other of [k + 1, k + 2, k + 7]) {
        const swapped = [...lines];
        [swapped[k], swapped[other]] = [lines[other] ?? '', lines[k]!];
        mustBeCaughtOrUnderstood(bytesOf(swapped.join('\n')), original);
      }
    }
  });

  it('cut anywhere are refused as truncated', () => {
    const text = difdup.trimEnd();
    for (let length = 1; length < text.length; length += 11) {
      const { code, retry } = refusal(text.slice(0, length));
      const isCutInTitle = length < '##TITLE='.length;
      expect(isCutInTitle ? ['jcamp-no-records', 'jcamp-title-first'] : ['jcamp-truncated']).toContain(code);
      if (!isCutInTitle) expect(retry).toBe('later');
    }
  });

  it('with a stretch taken out are caught, or give the same numbers', () => {
    fc.assert(
      fc.property(place, place, (from, to) => {
        const [start, end] = [Math.min(from, to), Math.max(from, to)].map((where) => at(whole, where)) as [number, number];
        mustBeCaughtOrUnderstood(Uint8Array.from([...whole.subarray(0, start), ...whole.subarray(end)]), original);
      }),
      { numRuns: 400, seed },
    );
  });
});

describe('damaged plain tables', () => {
  it.each(['AFFN', 'PAC', 'SQZ'] as const)('as %s lose or swap no line unseen', (form) => {
    const text = spectrumText({ form });
    const truth = decoded(text);
    const lines = text.split('\n');
    for (let k = 0; k < lines.length; k += 1) {
      mustBeCaughtOrUnderstood(bytesOf(lines.filter((_, index) => index !== k).join('\n')), truth);
      const swapped = [...lines];
      [swapped[k], swapped[k + 1]] = [lines[k + 1] ?? '', lines[k]!];
      mustBeCaughtOrUnderstood(bytesOf(swapped.join('\n')), truth);
    }
  });

  it.each(['AFFN', 'PAC', 'SQZ'] as const)('as %s with flipped bits throw nothing and keep the number of points', (form) => {
    const whole = bytesOf(spectrumText({ form }));
    fc.assert(
      fc.property(fc.array(fc.tuple(place, fc.integer({ min: 0, max: 7 })), { minLength: 1, maxLength: 4 }), (flips) => {
        const bytes = Uint8Array.from(whole);
        for (const [where, bit] of flips) bytes[at(bytes, where)]! ^= 1 << bit;
        const result = decodeJcamp(bytes, 'damaged.jdx');
        for (const block of result.ok ? result.value : []) if (block.ok) expect(block.value.real.length).toBe(300);
      }),
      { numRuns: 500, seed },
    );
  });
});

describe('damaged real files', () => {
  it.each(['conformance/o05.jdx', 'conformance/o10.jdx', 'instruments/400mhz-sequential.jdx'])(
    '%s with bytes changed are caught, or give the same numbers',
    (name) => {
      const whole = fileBytes(name);
      const truth = unwrap(single(decodeJcamp(whole, name)));
      fc.assert(
        fc.property(place, fc.integer({ min: 0, max: 7 }), (where, bit) => {
          const bytes = Uint8Array.from(whole);
          bytes[at(bytes, where)]! ^= 1 << bit;
          const result = decodeJcamp(bytes, name);
          for (const block of result.ok ? result.value : [])
            if (block.ok) expect(difference(truth, block.value)).toBeLessThanOrEqual(1e-4);
        }),
        { numRuns: 150, seed },
      );
    },
  );
});

describe('arbitrary bytes', () => {
  it('throw nothing', () => {
    const fragment = fc.constantFrom(
      '##TITLE=',
      '##END=',
      '##XYDATA= (X++(Y..Y))',
      '##NTUPLES=',
      '##DATA TYPE= LINK',
      '##PAGE= N=1',
      '\n',
      '1A2J%T',
      '$$',
      '##',
    );
    fc.assert(
      fc.property(fc.array(fc.oneof(fragment, fc.string({ maxLength: 12 })), { maxLength: 60 }), (pieces) => {
        decodeJcamp(Buffer.from(pieces.join('')), 'noise');
      }),
      { numRuns: 1000, seed },
    );
    fc.assert(
      fc.property(fc.uint8Array({ maxLength: 400 }), (bytes) => {
        decodeJcamp(bytes, 'noise');
      }),
      { numRuns: 1000, seed },
    );
  });
});
