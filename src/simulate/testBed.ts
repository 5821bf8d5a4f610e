import type { Acquisition } from '../decode/acquisition.js';
import type { Method, MethodSignal } from '../method/method.js';
import { firstOrderLines } from '../pattern/firstOrderLines.js';
import { parsePattern } from '../pattern/parsePattern.js';
import { trinomialLines } from '../pattern/trinomialLines.js';
import { makeRandom, type Random } from './random.js';
import { withSatellites } from './speciesLines.js';
import type { FidLine } from './synthesizeFid.js';
import { acquisitionOf } from './testBedAcquisition.js';
import { corrupt, drawHump } from './testBedDisturbances.js';
import { type BedShape, type BedTiming, bedFid } from './testBedFid.js';

/** One multiplet of a test case. */
export interface BedGroup {
  /** Present when the method names it. */
  readonly key?: string;
  readonly shiftPpm: number;
  readonly lines: readonly FidLine[];
}

/** A simulated acquisition with everything that is true of it. */
export interface BedCase {
  readonly seed: number;
  readonly acquisition: Acquisition;
  readonly method: Method;
  readonly timing: BedTiming;
  readonly shape: BedShape;
  readonly groups: readonly BedGroup[];
  /** Broad hump: lines that count as baseline. */
  readonly hump: readonly FidLine[];
  /** The noise that was added, shape (points) each. */
  readonly noise: { readonly real: Float64Array; readonly imag: Float64Array; readonly rms: number };
  /** Signal-to-noise of the tallest line that the case was made for. */
  readonly signalToNoise: number;
  readonly faults: { readonly corruptedPoints: number; readonly waterOverLeast: number; readonly hasReference: boolean };
}

/** Narrows what a case may hold; everything left out is drawn from the seed. */
export interface BedWishes {
  readonly points?: number;
  readonly observeMhz?: number;
  readonly signalToNoise?: number;
  readonly multiplets?: number;
  readonly originPoints?: number;
  readonly onset?: 'sudden' | 'filtered';
  /** No water line, no hump, no corrupted points, a symmetric shape. */
  readonly isClean?: boolean;
  readonly hasReference?: boolean;
  readonly widthHz?: number;
}

const fieldsMhz = [43, 60, 80, 300.13, 400.13, 500.13, 600.13, 800.13];

const patterns: readonly (readonly [text: string, couplings: readonly number[], nuclei: number])[] = [
  ['s', [], 3],
  ['d', [7], 3],
  ['t', [7.1], 3],
  ['q', [7.1], 2],
  ['dd', [15.9, 6.7], 1],
  ['dt', [10.2, 6.4], 1],
  ['quint', [6.8], 2],
  ['ddd', [8.2, 7.4, 1.3], 1],
  ['d', [8.5], 2],
  ['sept', [6.9], 1],
];

/**
 * Draws one test case with known truth: 43 to 800 MHz, 4,096 to 131,072 points, 3 to 60 multiplets of which the method names most,
 * any phase, onset 0 to 80 points, dead time, corrupted first points, hump, a water line up to 1e4 times the smallest signal,
 * 13C satellites, drift, asymmetric lines, noise, either direction of frequency, an axis unknown within a few ppm.
 *
 * @param seed   the case is a pure function of seed and wishes
 * @param wishes what is fixed instead of drawn
 */
export function makeBedCase(seed: number, wishes: BedWishes = {}): BedCase {
  const random = makeRandom(seed);
  const observeMhz = wishes.observeMhz ?? pick(random, fieldsMhz);
  const points = wishes.points ?? 2 ** random.integer(12, 17);
  const spectralWidthHz = random.between(13, 20) * observeMhz;
  const dwellS = 1 / spectralWidthHz;
  const timing = drawTiming(random, { observeMhz, dwellS, points }, wishes);
  const leastHz = 1 / (points * dwellS);
  const widthHz = wishes.widthHz ?? Math.max(random.between(0.4, 1.8), random.between(0.9, 1.6) * leastHz);
  const shape = drawShape(random, widthHz, wishes.isClean === true);
  const drawn = drawGroups(random, widthHz, observeMhz, wishes);
  const hump = !wishes.isClean && random.uniform() < 0.3 ? drawHump(random, observeMhz) : [];
  const lines = [...drawn.groups.flatMap((group) => group.lines), ...hump];
  const clean = bedFid(lines, shape, timing);
  const corruptedPoints = !wishes.isClean && timing.originPoints <= 0 && random.uniform() < 0.4 ? random.integer(1, 5) : 0;
  corrupt(clean, corruptedPoints, random);
  const signalToNoise = wishes.signalToNoise ?? 30 * 10 ** random.between(0, 2.5);
  const rms = noiseFor(drawn.groups, signalToNoise, points, dwellS);
  const noise = { real: new Float64Array(points), imag: new Float64Array(points), rms };
  for (let k = 0; k < points; k += 1) {
    noise.real[k] = rms * random.normal();
    noise.imag[k] = rms * random.normal();
  }
  const acquisition = acquisitionOf(seed, clean, noise, timing);
  return {
    seed,
    acquisition,
    method: drawn.method,
    timing,
    shape,
    groups: drawn.groups,
    hump,
    noise,
    signalToNoise,
    faults: { corruptedPoints, waterOverLeast: drawn.waterOverLeast, hasReference: drawn.hasReference },
  };
}

function pick<T>(random: Random, values: readonly T[]): T {
  return values[random.integer(0, values.length - 1)]!;
}

function drawTiming(
  random: Random,
  base: Pick<BedTiming, 'observeMhz' | 'dwellS' | 'points'>,
  { originPoints, onset }: BedWishes,
): BedTiming {
  const kind = random.uniform();
  const delayed = random.between(3, 80);
  const lost = random.between(0, 3);
  const isFiltered = random.uniform() < 0.6;
  const drawn = kind < 0.5 ? (isFiltered ? Math.max(delayed, 24) : delayed) : kind < 0.6 ? 0 : -lost;
  const origin = originPoints ?? drawn;
  return {
    ...base,
    carrierPpm: random.between(3, 7),
    originPoints: origin,
    onset: onset ?? (isFiltered && origin >= 20 ? 'filtered' : 'sudden'),
    phaseRad: random.between(-Math.PI, Math.PI),
    isForward: random.uniform() < 0.5,
  };
}

function drawShape(random: Random, widthHz: number, isClean: boolean): BedShape {
  const size = random.uniform() < 0.5 ? random.between(0, 0.8) : 0;
  const side = random.uniform() < 0.5 ? 1 : -1;
  const drift = random.between(-0.05, 0.05) * widthHz;
  if (isClean) return { parts: [{ offsetHz: 0, share: 1 }], driftHzPerS: 0 };
  const parts = [
    { offsetHz: 0, share: 0.75 },
    { offsetHz: side * 0.5 * size * widthHz, share: 0.17 },
    { offsetHz: side * 1.3 * size * widthHz, share: 0.08 },
  ];
  return { parts, driftHzPerS: drift };
}

function drawGroups(random: Random, widthHz: number, observeMhz: number, wishes: BedWishes) {
  const count = wishes.multiplets ?? Math.round(3 * 20 ** random.uniform());
  const offsetPpm = random.between(-0.02, 0.02);
  const groups: BedGroup[] = [];
  const signals: MethodSignal[] = [];
  let least = Number.POSITIVE_INFINITY;
  for (let index = 0; index < count; index += 1) {
    const [text, couplings, nuclei] = pick(random, patterns);
    const shiftPpm = random.between(0.6, 9.4);
    const pattern = parsePattern(text, couplings);
    if (!pattern.ok) continue;
    const amount = 10 ** random.between(-1.3, 0);
    const isNamed = index < 2 || random.uniform() < 0.7;
    const isThere = !isNamed || index < 2 || random.uniform() < 0.85;
    const key = `species/${index}`;
    if (isNamed)
      signals.push({
        id: `${index}`,
        key,
        shiftPpm,
        withinPpm: 0.05,
        pattern: pattern.value,
        nuclei,
        use: 'quantify',
        moves: false,
      });
    if (!isThere) continue;
    const foundPpm = shiftPpm + offsetPpm + (isNamed ? random.between(-0.006, 0.006) : 0);
    const lines = firstOrderLines(pattern.value).flatMap(({ offsetHz, share }) =>
      withSatellites(
        { shiftPpm: foundPpm + offsetHz / observeMhz, area: amount * nuclei * share, widthHz },
        { observeMhz, carbonCouplingHz: random.uniform() < 0.7 ? 128 : 0 },
      ),
    );
    least = Math.min(least, amount * nuclei);
    groups.push({ ...(isNamed ? { key } : {}), shiftPpm: foundPpm, lines });
  }
  const hasReference = wishes.hasReference ?? random.uniform() < 0.85;
  if (hasReference)
    groups.push({ key: 'tetramethylsilane', shiftPpm: offsetPpm, lines: [{ shiftPpm: offsetPpm, area: 0.6, widthHz }] });
  groups.push(solventGroup(random, offsetPpm, widthHz, observeMhz));
  const hasWater = random.uniform() < 0.3;
  const waterOverLeast = 10 ** random.between(1, 4);
  if (hasWater && !wishes.isClean) {
    const shiftPpm = 3.33 + random.between(-0.05, 0.05);
    groups.push({ shiftPpm, lines: [{ shiftPpm, area: waterOverLeast * least, widthHz: widthHz * random.between(1, 4) }] });
  }
  return { groups, method: methodOf(signals), waterOverLeast: hasWater && !wishes.isClean ? waterOverLeast : 0, hasReference };
}

function solventGroup(random: Random, offsetPpm: number, widthHz: number, observeMhz: number): BedGroup {
  const shiftPpm = 2.5 + offsetPpm;
  const area = random.between(0.2, 3);
  const lines = trinomialLines(2, 1.9).map(({ offsetHz, share }) => ({
    shiftPpm: shiftPpm + offsetHz / observeMhz,
    area: area * share,
    widthHz,
  }));
  return { shiftPpm, lines };
}

function methodOf(signals: readonly MethodSignal[]): Method {
  return {
    title: 'test bed',
    version: '1',
    sha256: '0'.repeat(64),
    nucleus: '1H',
    solvent: 'DMSO-d6',
    reference: { signal: 'tetramethylsilane', shiftPpm: 0 },
    species: [{ id: 'species', name: 'species', role: 'product', stoichiometry: 1, signals }],
    limits: [],
    processing: { lineBroadeningHz: 'matched', zeroFilling: 2, phase: 'automatic', baseline: 'automatic' },
    acquisition: {},
    kinetics: {},
    quality: {},
    input: {},
  };
}

/** Noise per point so that the tallest line but water reaches the wished ratio under a window matched to the acquisition. */
function noiseFor(groups: readonly BedGroup[], signalToNoise: number, points: number, dwellS: number): number {
  const windowHz = 0.6 / (points * dwellS);
  const named = groups.filter(({ key }) => key !== undefined);
  const heights = named.flatMap(({ lines }) => lines.map(({ area, widthHz }) => (2 * area) / (Math.PI * (widthHz + windowHz))));
  const tallest = Math.max(...heights);
  const decay = 2 * Math.PI * windowHz * dwellS;
  const power = (1 - Math.exp(-decay * points)) / decay;
  return tallest / signalToNoise / (2 * dwellS * Math.sqrt(power));
}
