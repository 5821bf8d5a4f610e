import { describe, expect, it } from 'vitest';
import { parsePattern } from '../../src/pattern/parsePattern.js';
import { measureSignals } from '../../src/signal/measureSignals.js';
import { makeRandom } from '../../src/simulate/random.js';
import { buildMethod } from '../builders/method.js';
import { interloperCase } from './beds.js';
import { makeTestSpectrum } from './makeTestSpectrum.js';
import { asSpecies, fidLinesOf, fields, noiseFor, randomSignal } from './randomCase.js';

describe('an interloper of 3 percent at signal-to-noise 200', () => {
  const share = 0.03;
  const cases = Array.from({ length: 100 }, (_, seed) => interloperCase(9000 + seed, share).measured[0]!);
  const found = cases.map(({ leftOver }) => (leftOver === undefined ? 0 : leftOver.share / (1 - leftOver.share)));

  it('is noticed in 95 percent of cases', () => {
    expect(
      cases.filter(({ leftOver, verdict }) => leftOver !== undefined || verdict === 'differs').length,
    ).toBeGreaterThanOrEqual(95);
  });

  it('has its share estimated within a third', () => {
    expect(found.filter((value) => Math.abs(value - share) < share / 3).length).toBeGreaterThanOrEqual(95);
  });

  it('leaves the verdict on the pattern itself alone', () => {
    expect(cases.filter(({ verdict }) => verdict === 'matches').length).toBeGreaterThanOrEqual(95);
  });
});

describe('a pattern that is not the declared one', () => {
  const declared = ['s', 'd', 't', 'q', 'quint', 'sext', 'sept', 'dd', 'dt', 'td'];

  function wrongCase(seed: number) {
    const random = makeRandom(seed);
    const observeMhz = fields[random.integer(0, fields.length - 1)]!;
    const widthHz = random.between(0.5, 2);
    const truth = randomSignal(random, 4.5);
    let wrong = truth.pattern.text;
    while (wrong === truth.pattern.text) wrong = declared[random.integer(0, declared.length - 1)]!;
    return {
      observeMhz,
      widthHz,
      truth,
      listed: listing(
        wrong,
        truth.pattern.splittings.map(({ couplingHz }) => couplingHz!),
      ),
      seed,
    };
  }

  function listing(text: string, trueHz: readonly number[]): string {
    const bare = parsePattern(text, []);
    if (!bare.ok) throw new Error(bare.problem.message);
    const couplings = bare.value.splittings.map((_, k) => (trueHz[k] ?? (k === 0 ? 7.1 : (trueHz[0] ?? 7.1) / 2.3)).toFixed(1));
    return `4.50 (${text}${couplings.length > 0 ? `, J = ${couplings.join(', ')} Hz` : ''}, 2H)`;
  }

  function measureWrong({ observeMhz, widthHz, truth, listed, seed }: ReturnType<typeof wrongCase>) {
    const lines = fidLinesOf(truth, 1, widthHz, observeMhz);
    const settings = { observeMhz, noise: noiseFor(200, lines), seed, points: 8192, spectralWidthHz: observeMhz * 12 };
    const species = [asSpecies('x', { a: { ...truth, listed } })];
    return measureSignals(makeTestSpectrum(lines, settings), buildMethod({ species })).signals[0]!;
  }

  const cases = Array.from({ length: 60 }, (_, seed) => wrongCase(19_000 + seed));
  const measured = cases.map(measureWrong);

  it('is called different every time', () => {
    expect(measured.filter(({ verdict }) => verdict !== 'differs').map(({ words }) => words)).toEqual([]);
  });

  it('is named rightly nine times in ten', () => {
    const named = measured.filter(({ found }, index) => found === cases[index]!.truth.pattern.text).length;
    expect(named).toBeGreaterThanOrEqual(54);
  });

  it('is a quartet where a triplet was declared, at every field', () => {
    for (const observeMhz of fields) {
      const parsed = parsePattern('q', [7.1]);
      if (!parsed.ok) throw new Error(parsed.problem.message);
      const truth = { ...randomSignal(makeRandom(observeMhz), 4.5, ['q']), listed: '4.50 (t, J = 7.1 Hz, 2H)' };
      const result = measureWrong({ observeMhz, widthHz: 1, truth, listed: truth.listed, seed: observeMhz });
      expect(result).toMatchObject({ verdict: 'differs', found: 'q', neighboursImplied: 3 });
      expect(result.words).toMatch(/^a quartet, J = .* Hz, where a triplet is expected$/);
    }
  });
});
