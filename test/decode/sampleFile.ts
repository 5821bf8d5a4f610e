import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect } from 'vitest';
import type { Problem, Result } from '../../src/base/result.js';
import type { Acquisition } from '../../src/decode/acquisition.js';
import { decodeJcamp } from '../../src/decode/decodeJcamp.js';
import { type JcampFields, type JcampOptions, writeJcamp } from '../../src/simulate/writeJcamp.js';

export const dataFolder = join(import.meta.dirname, '..', 'data');

export function bytesOf(text: string): Uint8Array {
  return Buffer.from(text, 'latin1');
}

export function fileBytes(name: string): Uint8Array {
  return readFileSync(join(dataFolder, name));
}

/** A short invented FID: 300 whole numbers a channel, two oscillations and a ripple. */
export const fidFields: JcampFields = {
  kind: 'fid',
  title: 'Invented batch 7, 30 min',
  nucleus: '1H',
  observeMhz: 400.13,
  dwellS: 0.0002088,
  longDate: '2026-03-14T19:31:00Z',
  scans: 16,
  real: wave(0),
  imag: wave(1.5),
};

/** The same length as a real spectrum in hertz, 12 to -2 ppm. */
export const spectrumFields: JcampFields = {
  kind: 'spectrum',
  title: 'Invented batch 7, 30 min',
  nucleus: '1H',
  observeMhz: 400.13,
  axis: { unit: 'HZ', first: 4801.56, last: -800.26 },
  real: wave(0.3),
};

function wave(phase: number): Float64Array {
  return Float64Array.from({ length: 300 }, (_, k) =>
    Math.round(9e5 * Math.cos(k / 3 + phase) * Math.exp(-k / 90) + 2e4 * Math.sin(k * k + phase)),
  );
}

export const fidText = (options: JcampOptions = {}, changes: Partial<JcampFields> = {}) =>
  writeJcamp({ ...fidFields, ...changes }, options);
export const spectrumText = (options: JcampOptions = {}, changes: Partial<JcampFields> = {}) =>
  writeJcamp({ ...spectrumFields, ...changes }, options);

/** Decodes a text with one block; whatever fails, outer or inner, is its problem. */
export function decodeText(text: string, privateRecords?: readonly string[]): Result<Acquisition> {
  return single(decodeJcamp(bytesOf(text), 'sample.jdx', privateRecords ? { privateRecords } : {}));
}

export function single(decoded: Result<readonly Result<Acquisition>[]>): Result<Acquisition> {
  if (!decoded.ok) return decoded;
  expect(decoded.value).toHaveLength(1);
  return decoded.value[0]!;
}

export function decoded(text: string): Acquisition {
  return unwrap(decodeText(text));
}

export function unwrap<T>(result: Result<T>): T {
  if (!result.ok) throw new Error(`${result.problem.code}: ${result.problem.message}`);
  return result.value;
}

export function problemOf(result: Result<unknown>): Problem {
  if (result.ok) throw new Error('a problem was expected');
  return result.problem;
}

export const refusal = (text: string) => problemOf(decodeText(text));
export const flagCodes = (acquisition: Acquisition) => acquisition.flags.map(({ code }) => code);
