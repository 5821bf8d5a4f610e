import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { fastFourier, inverseFourier } from '../../src/spectrum/fastFourier.js';
import { hilbertPartner } from '../../src/spectrum/hilbertPartner.js';
import { rotatePhase } from '../../src/spectrum/rotatePhase.js';
import { smoothBanded } from '../../src/spectrum/smoothBanded.js';
import { transformFid } from '../../src/spectrum/transformFid.js';

// Made by spectrum_vectors.py beside it, with NumPy and SciPy.
const vectors = JSON.parse(readFileSync(new URL('../reference/spectrum/vectors.json', import.meta.url), 'utf8'));

/** Rounding of sums over 64 numbers of size one: some 1e-14; a wrong sign or factor would show at 1. */
const tolerance = 1e-12;

function expectClose(found: ArrayLike<number>, wanted: readonly number[], within = tolerance): void {
  expect(found.length).toBe(wanted.length);
  for (let i = 0; i < wanted.length; i += 1) expect(Math.abs(found[i]! - wanted[i]!)).toBeLessThan(within);
}

const interleave = (re: readonly number[], im: readonly number[]) => Float64Array.from(re.flatMap((value, k) => [value, im[k]!]));

describe('against NumPy and SciPy', () => {
  it('the transform is numpy.fft.fft, and its inverse undoes it', () => {
    const { in_re, in_im, re, im } = vectors.fourier;
    const input = interleave(in_re, in_im);
    const output = fastFourier(input);
    expectClose(output, [...interleave(re, im)]);
    expectClose(inverseFourier(output), [...input]);
  });

  it('the exponential window multiplies the FID as NumPy computes it', () => {
    const { dwell_s, broadening_hz, values } = vectors.window;
    const { in_re, in_im } = vectors.fourier;
    const [real, imag] = [Float64Array.from(in_re as number[]), Float64Array.from(in_im as number[])];
    const settings = { onsetPoints: 0, zeroFilling: 1, keepsEarly: false };
    const windowed = transformFid(real, imag, dwell_s, { ...settings, lineBroadeningHz: broadening_hz });
    const by = (array: Float64Array) => array.map((value, k) => value * (values[k] as number));
    const plain = transformFid(by(real), by(imag), dwell_s, { ...settings, lineBroadeningHz: 0 });
    expectClose(windowed.real, [...plain.real]);
    expectClose(windowed.imag, [...plain.imag]);
  });

  it('the dispersive partner is the Hilbert transform of SciPy, turned to the sign of a decaying signal', () => {
    const partner = hilbertPartner(Float64Array.from(vectors.hilbert.in as number[]));
    expectClose(
      partner.map((value) => -value),
      vectors.hilbert.values,
    );
  });

  it('the banded smoother solves the same equations as scipy.sparse', () => {
    const { y, weights, lambda, values } = vectors.smoother;
    // The guard of 1e-12 on the diagonal and the order of elimination leave about 1e-10.
    expectClose(smoothBanded(Float64Array.from(y as number[]), Float64Array.from(weights as number[]), lambda), values, 1e-9);
  });

  it('the phase model is S exp(-i (zero + first (j/n - 1/2))), and turning back is identity', () => {
    const { in_re, in_im } = vectors.fourier;
    const spectrum = { real: Float64Array.from(in_re as number[]), imag: Float64Array.from(in_im as number[]), stepHz: 1 };
    const { zero_rad, first_rad, re, im } = vectors.phase;
    const turned = rotatePhase(spectrum, zero_rad, first_rad);
    expectClose(turned.real, re);
    expectClose(turned.imag, im);
    expectClose(rotatePhase(turned, -zero_rad, -first_rad).real, in_re);
  });
});
