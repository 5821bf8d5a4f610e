import { describe, expect, it } from 'vitest';
import type { Acquisition } from '../../src/decode/acquisition.js';
import { makeRandom } from '../../src/simulate/random.js';
import { type FidLine, type FidSettings, synthesizeFid } from '../../src/simulate/synthesizeFid.js';
import { makeBedCase } from '../../src/simulate/testBed.js';
import { makeSpectrum } from '../../src/spectrum/makeSpectrum.js';
import type { Spectrum } from '../../src/spectrum/spectrum.js';
import { buildMethod, buildSpecies } from '../builders/method.js';

const observeMhz = 400;
const species = buildSpecies('ester', { OCH2: '4.12 (s, 2H)', CH3: '2.04 (s, 3H)', CH: '6.10 (s, 1H)' });
const method = buildMethod({ solvent: 'CDCl3', species: [species] });
const linesOf = (widthHz: number): FidLine[] => [
  { shiftPpm: 0, area: 1, widthHz },
  { shiftPpm: 2.04, area: 3, widthHz },
  { shiftPpm: 4.12, area: 2, widthHz },
  { shiftPpm: 6.1, area: 1, widthHz },
  { shiftPpm: 7.26, area: 0.7, widthHz },
];
const plain: FidSettings = { observeMhz, carrierPpm: 4.7, spectralWidthHz: 6400, points: 16_384, phaseDeg: 77 };

function acquire(lines: readonly FidLine[], settings: Partial<FidSettings> = {}, seed = 3): Acquisition {
  const all = { ...plain, ...settings };
  const { real, imag, dwellS } = synthesizeFid(lines, all, makeRandom(seed));
  const spectralWidthHz = all.spectralWidthHz;
  const base = { kind: 'fid' as const, title: 't', nucleus: '1H', observeMhz, acquiredSource: 'none' as const };
  return { ...base, real, imag, dwellS, spectralWidthHz, dataSha256: '', flags: [] };
}

function process(acquisition: Acquisition, by = method): Spectrum {
  const result = makeSpectrum(acquisition, by);
  if (!result.ok) throw new Error(result.problem.message);
  return result.value;
}

/** Sum x step over +- reach, over the share of a Lorentzian that lies inside: (2 / pi) atan(2 reach / width). */
function areaAt(spectrum: Spectrum, shiftPpm: number, widthHz: number, reachHz: number): number {
  const centre = (spectrum.firstPpm - shiftPpm) / spectrum.stepPpm;
  const reach = Math.round(reachHz / spectrum.stepHz);
  const middle = Math.round(centre);
  let sum = 0;
  for (let i = middle - reach; i <= middle + reach; i += 1) sum += spectrum.real[i]!;
  const inside = (2 / Math.PI) * Math.atan((2 * (reach + 0.5) * spectrum.stepHz) / widthHz);
  return (sum * spectrum.stepHz) / inside;
}

const codes = (spectrum: Spectrum) => spectrum.flags.map(({ code }) => code);

describe('makeSpectrum', () => {
  it('keeps the area of an isolated line of a noise-free FID within 0.1 %, whatever phase, onset and zero filling', () => {
    for (const [phaseDeg, onsetPoints, zeroFilling] of [
      [0, 0, 1],
      [77, 0, 2],
      [-150, 61.3, 2],
      [33, 12.7, 4],
    ] as const) {
      const by = buildMethod({ ...method, processing: { ...method.processing, lineBroadeningHz: 0.5, zeroFilling } });
      const spectrum = process(acquire(linesOf(1.5), { phaseDeg, onsetPoints }), by);
      for (const [shiftPpm, area] of [
        [2.04, 3],
        [4.12, 2],
        [6.1, 1],
      ] as const)
        expect(Math.abs(areaAt(spectrum, shiftPpm, 2, 60) / area - 1)).toBeLessThan(1e-3);
    }
  });

  it('gives the same areas, within noise, for the same FID under another phase', () => {
    const first = process(acquire(linesOf(1.5), { phaseDeg: 10, noise: 0.02 }, 8));
    const second = process(acquire(linesOf(1.5), { phaseDeg: -140, noise: 0.02 }, 9));
    const reachHz = 25;
    // Noise of a sum over N points of step s: sigma s sqrt(2 N) with neighbours alike by twofold zero filling; level error added.
    const count = (2 * reachHz) / first.stepHz;
    const u = first.noise * first.stepHz * Math.sqrt(2 * count) + 2 * reachHz * first.baselineU;
    for (const shiftPpm of [2.04, 4.12, 6.1]) {
      const difference = areaAt(first, shiftPpm, 1.5, reachHz) - areaAt(second, shiftPpm, 1.5, reachHz);
      expect(Math.abs(difference)).toBeLessThan(4 * u);
    }
  });

  it('finds either direction of frequency', () => {
    for (const forward of [true, false]) {
      const spectrum = process(acquire(linesOf(1.5), { forward, noise: 0.01 }));
      expect(codes(spectrum)).not.toContain('axis-uncertain');
      expect(areaAt(spectrum, 4.12, 1.5, 40)).toBeCloseTo(2, 1);
    }
  });

  it('phases a real spectrum through its Hilbert transform and says so', () => {
    const whole = process(
      acquire(linesOf(1.5)),
      buildMethod({ ...method, processing: { ...method.processing, baseline: 'none' } }),
    );
    const turn = (40 * Math.PI) / 180;
    const real = whole.real.map((value, i) => value * Math.cos(turn) + whole.imag![i]! * Math.sin(turn));
    const lastPpm = whole.firstPpm - (real.length - 1) * whole.stepPpm;
    const { imag: _, dwellS: __, ...base } = acquire(linesOf(1.5));
    const axis = { firstPpm: whole.firstPpm, lastPpm };
    const spectrum = process({ ...base, kind: 'real-spectrum', real, axis, spectralWidthHz: whole.stepHz * real.length });
    expect(codes(spectrum)).toContain('phase-from-hilbert');
    expect(areaAt(spectrum, 4.12, 1.5, 40)).toBeCloseTo(2, 1);
  });

  it('leaves a real spectrum in phase as it came', () => {
    const whole = process(acquire(linesOf(1.5)));
    const { imag: _, dwellS: __, ...base } = acquire(linesOf(1.5));
    const axis = { firstPpm: whole.firstPpm, lastPpm: whole.firstPpm - (whole.real.length - 1) * whole.stepPpm };
    const spectralWidthHz = whole.stepHz * whole.real.length;
    const spectrum = process({ ...base, kind: 'real-spectrum', real: whole.real, axis, spectralWidthHz });
    expect(spectrum.quality.phaseDeg).toEqual([0, 0]);
  });

  it('reads a FID of one channel', () => {
    const { imag: _, ...oneChannel } = acquire(linesOf(1.5), { carrierPpm: -1.5, spectralWidthHz: 8000 });
    const spectrum = process(oneChannel);
    expect(areaAt(spectrum, 4.12, 1.5, 40)).toBeCloseTo(2, 1);
  });
});

describe('what makeSpectrum refuses', () => {
  const refused = (acquisition: Acquisition) => {
    const result = makeSpectrum(acquisition, method);
    return result.ok ? undefined : result.problem.code;
  };
  it('another nucleus than the method follows', () => {
    expect(refused({ ...acquire(linesOf(1.5)), nucleus: '19F' })).toBe('nucleus-differs');
  });
  it('a file without observe frequency', () => {
    const { observeMhz: _, ...without } = acquire(linesOf(1.5));
    expect(refused(without)).toBe('observe-frequency-missing');
  });
  it('noise without a signal', () => {
    expect(refused(acquire([], { noise: 1 }))).toBe('no-signal');
  });
});

describe('a spectrum that does not belong to the method', () => {
  it('is refused or flagged, never placed in silence', () => {
    const foreign = [8.8, 1.1, 9.9, 5.2, 5.35].map((shiftPpm) => ({ shiftPpm, area: 1, widthHz: 1 }));
    const result = makeSpectrum(acquire(foreign, { noise: 0.01 }), method);
    const said = result.ok ? codes(result.value) : [result.problem.code];
    expect(said.some((code) => ['axis-not-found', 'axis-uncertain', 'reference-missing'].includes(code))).toBe(true);
  });
});

describe('the flags of makeSpectrum', () => {
  it('receiver overload: a FID flattened at its largest value', () => {
    const acquisition = acquire(linesOf(1.5), { noise: 0.01 });
    const clip = (values: Float64Array) => values.map((value) => Math.max(-3, Math.min(3, value)));
    expect(codes(process({ ...acquisition, real: clip(acquisition.real), imag: clip(acquisition.imag!) }))).toContain(
      'receiver-overload',
    );
  });
  it('broad lines', () => {
    expect(codes(process(acquire(linesOf(9), { noise: 0.01 })))).toContain('lines-broad');
  });
  it('asymmetric lines', () => {
    const uneven = linesOf(0.8).flatMap((line) => [
      { ...line, area: 0.6 * line.area },
      { ...line, area: 0.25 * line.area, shiftPpm: line.shiftPpm + 1.0 / observeMhz },
      { ...line, area: 0.15 * line.area, shiftPpm: line.shiftPpm + 2.2 / observeMhz },
    ]);
    expect(codes(process(acquire(uneven, { noise: 0.003 })))).toContain('lines-asymmetric');
  });
  it('a split reference', () => {
    const lines = linesOf(1).flatMap((line) =>
      line.shiftPpm === 0
        ? [
            { ...line, area: 0.5 },
            { ...line, area: 0.5, shiftPpm: 4 / observeMhz },
          ]
        : [line],
    );
    expect(codes(process(acquire(lines, { noise: 0.003 })))).toContain('reference-split');
  });
  it('a missing reference, with the next best named', () => {
    const spectrum = process(acquire(linesOf(1.5).slice(1), { noise: 0.01 }));
    const flag = spectrum.flags.find(({ code }) => code === 'reference-missing');
    expect(flag?.message).toContain('solvent');
    expect(spectrum.reference.used).toBe('solvent');
  });
  it('too few points across a line', () => {
    const by = buildMethod({ ...method, quality: { points_across_line: 30 } });
    expect(codes(process(acquire(linesOf(1.5), { noise: 0.01 }), by))).toContain('points-too-few');
  });
  it('an acquisition cut while the signal still rings', () => {
    const by = buildMethod({ ...method, processing: { ...method.processing, lineBroadeningHz: 2 } });
    expect(codes(process(acquire(linesOf(0.5), { points: 2048, noise: 0.003 }), by))).toContain('acquisition-short');
  });
  it('scans that follow too fast for the longest T1', () => {
    const by = buildMethod({ ...method, acquisition: { longestT1S: 5, relaxationDelayS: 1 } });
    expect(codes(process(acquire(linesOf(1.5), { noise: 0.01 }), by))).toContain('repetition-short');
  });
  it('none of them in clean cases more often than 1 in 100', { timeout: 120_000 }, () => {
    const counts = new Map<string, number>();
    let cases = 0;
    for (let seed = 1; seed <= 50; seed += 1) {
      const wishes = { isClean: true, hasReference: true, points: 8192, observeMhz: 400.13, signalToNoise: 500, multiplets: 8 };
      const bedCase = makeBedCase(seed, { ...wishes, widthHz: 1.4 });
      const result = makeSpectrum(bedCase.acquisition, bedCase.method);
      cases += 1;
      for (const code of result.ok ? result.value.flags.map((flag) => flag.code) : [result.problem.code])
        counts.set(code, (counts.get(code) ?? 0) + 1);
    }
    expect(cases).toBe(50);
    expect([...counts].filter(([, count]) => count > 1)).toEqual([]);
  });
});
