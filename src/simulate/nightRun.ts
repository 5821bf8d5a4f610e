import type { Method } from '../method/method.js';
import { makeRandom } from './random.js';
import { speciesLines, withSatellites } from './speciesLines.js';
import { type FidLine, synthesizeFid } from './synthesizeFid.js';

/** One simulated time point of the sample night, with its truth. */
export interface NightPoint {
  readonly name: string;
  readonly acquired: string;
  readonly elapsedS: number;
  readonly conversion: number;
  readonly impurityShare: number;
  readonly real: Float64Array;
  readonly imag: Float64Array;
  readonly dwellS: number;
  readonly observeMhz: number;
}

const observeMhz = 400.13;
const pointCount = 16_384;
const spectralWidthHz = 6410.256;
const intervalS = 1800;
const startedMs = Date.UTC(2026, 2, 14, 18, 0, 0);

/**
 * Simulates the sample night: second-order acetylation with an excess of anhydride, an olefin that grows in, a trace of
 * tert-butyl methyl ether, drifting shifts, random phases, delayed onset, a rolling baseline and noise. Everything from one seed.
 *
 * @param method the sample method: its species ids are those of the scenario
 * @param count  number of time points, one every 30 minutes
 * @returns points by time, with the true conversion and impurity share
 * @source integrated second-order rate law with unequal start (textbook form); all numbers invented
 */
export function simulateNight(method: Method, seed: number, count = 28): NightPoint[] {
  const random = makeRandom(seed);
  return Array.from({ length: count }, (_, index) => {
    const elapsedS = 420 + index * intervalS + Math.round(random.between(-40, 40));
    const conversion = conversionAt(elapsedS);
    const impurityShare = 0.05 * Math.max(0, 1 - Math.exp(-(elapsedS - 12_600) / 20_000));
    const driftPpm = 0.004 * Math.sin(elapsedS / 9000);
    const settings = { observeMhz, widthHz: 0.7 + 0.25 * random.uniform(), driftPpm, carbonCouplingHz: 128 };
    const lines = [
      ...speciesLines(method, amountsAt(conversion, impurityShare), settings),
      ...backgroundLines(settings),
      ...olefinLines(impurityShare, settings),
    ];
    const fid = synthesizeFid(
      lines,
      {
        observeMhz,
        carrierPpm: 6.1,
        spectralWidthHz,
        points: pointCount,
        phaseDeg: random.between(-180, 180),
        onsetPoints: 67.984,
        noise: 0.03,
      },
      random,
    );
    disturbFirstPoints(fid.real, fid.imag, random.between(-1, 1));
    const acquired = new Date(startedMs + elapsedS * 1000).toISOString().replace('.000Z', 'Z');
    return {
      name: `tp-${String(index).padStart(3, '0')}.jdx`,
      acquired,
      elapsedS,
      conversion,
      impurityShare,
      observeMhz,
      ...fid,
    };
  });
}

/** Second order, unequal start: kt (B0 - A0) = ln(A0 B / (A B0)) with A0 = 1, B0 = 1.8. */
function conversionAt(elapsedS: number): number {
  const excess = 0.8;
  const growth = Math.exp(1.15e-4 * excess * elapsedS);
  return ((1 + excess) * (growth - 1)) / ((1 + excess) * growth - 1);
}

function amountsAt(conversion: number, impurityShare: number): Record<string, number> {
  return {
    alcohol: 1 - conversion,
    ester: conversion * (1 - impurityShare),
    anhydride: 1.8 - conversion,
    acid: conversion,
    standard: 0.161,
  };
}

type LineOptions = Parameters<typeof speciesLines>[2];

/** Reference, residual solvent, water and a trace of tert-butyl methyl ether. */
function backgroundLines(settings: LineOptions): FidLine[] {
  const { widthHz, driftPpm = 0 } = settings;
  return [
    { shiftPpm: 0, area: 0.6, widthHz },
    { shiftPpm: 7.26, area: 0.35, widthHz },
    { shiftPpm: 1.56, area: 0.12, widthHz: widthHz + 2 },
    { shiftPpm: 1.19, area: 0.036, widthHz },
    { shiftPpm: 3.22, area: 0.012, widthHz },
  ].flatMap((line) => withSatellites({ ...line, shiftPpm: line.shiftPpm + driftPpm }, { observeMhz }));
}

/** Vinyl group of the olefin formed from the ester: dd, dd, dd with J 17.6, 10.9 and 0.9 Hz. */
function olefinLines(share: number, settings: LineOptions): FidLine[] {
  const { widthHz, driftPpm = 0 } = settings;
  const groups = [
    { shiftPpm: 6.72, couplingsHz: [17.6, 10.9] },
    { shiftPpm: 5.75, couplingsHz: [17.6, 0.9] },
    { shiftPpm: 5.25, couplingsHz: [10.9, 0.9] },
  ];
  return groups.flatMap(({ shiftPpm, couplingsHz: [first = 0, second = 0] }) =>
    [first + second, first - second, second - first, -first - second].map((sumHz) => ({
      shiftPpm: shiftPpm + driftPpm + sumHz / 2 / observeMhz,
      area: share / 4,
      widthHz,
    })),
  );
}

/** A receiver that is still settling: the first points after the onset are off, which rolls the baseline. */
function disturbFirstPoints(real: Float64Array, imag: Float64Array, strength: number): void {
  for (let k = 0; k < 3; k += 1) {
    const index = 68 + k;
    real[index] = real[index]! + strength * 0.3 * Math.exp(-k);
    imag[index] = imag[index]! - strength * 0.2 * Math.exp(-k);
  }
}
