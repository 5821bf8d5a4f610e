import { readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { coupledSignals, expectedLines } from '../../src/method/expectedLines.js';
import { firstOrderLines } from '../../src/pattern/firstOrderLines.js';
import { lorentzSum } from '../../src/pattern/lorentzSum.js';
import { speciesOf } from './speciesOf.js';

const ethyl = speciesOf({ OCH2: '4.12 (q, J = 7.1 Hz, 2H)', CH3: '1.25 (t, J = 7.1 Hz, 3H)', acetyl: '2.04 (s, 3H)' });
const ring = speciesOf({ a: '7.95 (d, J = 8.7 Hz, 2H)', b: '6.90 (d, J = 8.7 Hz, 2H)' });

describe('expectedLines', () => {
  it('gives every signal shares that sum to 1, and a singlet one line at its shift', () => {
    for (const observeMhz of [60, 400]) {
      const lines = expectedLines(ethyl, observeMhz);
      expect([...lines.keys()]).toEqual(['OCH2', 'CH3', 'acetyl']);
      for (const own of lines.values()) expect(own.reduce((sum, line) => sum + line.share, 0)).toBeCloseTo(1, 10);
      expect(lines.get('acetyl')).toEqual([{ offsetHz: 0, share: 1 }]);
    }
  });

  it('shows the roof at 60 MHz and the first-order pattern in the limit of a strong field', () => {
    const lean = (observeMhz: number) =>
      expectedLines(ethyl, observeMhz)
        .get('OCH2')!
        .reduce((sum, line) => sum + line.share * Math.sign(line.offsetHz), 0);
    // The methyl lies at lower shift, so the quartet leans that way.
    expect(lean(60)).toBeLessThan(-0.05);
    expect(lean(600)).toBeLessThan(0);
    expect(lean(60)).toBeLessThan(2 * lean(600));
    expect(Math.abs(lean(1e6))).toBeLessThan(1e-3);
  });

  it('moves the lines of a partner when a shift moves', () => {
    const apart = expectedLines(ethyl, 60).get('CH3')!;
    const close = expectedLines(ethyl, 60, { OCH2: 1.5 }).get('CH3')!;
    const high = (lines: typeof apart) => lines.filter((line) => line.offsetHz > 3).reduce((sum, line) => sum + line.share, 0);
    expect(high(close)).toBeGreaterThan(high(apart) + 0.05);
  });

  it("shows a ring of two doublets as AA'BB', not as two triplets and not as two plain doublets", () => {
    const lines = expectedLines(ring, 400).get('a')!;
    const strong = lines.filter((line) => line.share > 0.02);
    expect(strong.length).toBeGreaterThan(4);
    // Half the intensity lies in two lines J(ortho) + J(para) apart (Pople, Schneider, Bernstein: N = 8.7 + 0.5 Hz).
    const doublet = lines.filter((line) => Math.abs(Math.abs(line.offsetHz) - 9.2 / 2) < 0.3);
    expect(doublet.reduce((sum, line) => sum + line.share, 0)).toBeCloseTo(0.5, 2);
    // A triplet would have half of it in the middle.
    expect(strong.filter((line) => Math.abs(line.offsetHz) < 1).reduce((sum, line) => sum + line.share, 0)).toBeLessThan(0.05);
  });

  it('takes cross couplings from the method when given', () => {
    const given = speciesOf({
      a: { listed: '7.95 (d, J = 8.7 Hz, 2H)', cross: [0.0001, 0] },
      b: { listed: '6.90 (d, J = 8.7 Hz, 2H)', cross: [0.0001, 0] },
    });
    const lines = expectedLines(given, 4000).get('a')!;
    expect(lines.filter((line) => line.share > 0.01)).toHaveLength(2);
  });

  it("solves a listed phenyl group as AA'BB'C, agreeing with a plain diagonalisation", () => {
    const phenyl = speciesOf({
      o: { listed: `${482 / 60} (d, J = 7.7 Hz, 2H)`, coupled: { m: 7.7 }, cross: [0.6, 2.0] },
      m: { listed: `${446 / 60} (t, J = 7.6 Hz, 2H)`, coupled: { p: 7.5 }, cross: [0.6, 1.5] },
      p: `${454 / 60} (t, J = 7.5 Hz, 1H)`,
    });
    const drawn = [...expectedLines(phenyl, 60)].flatMap(([id, lines]) => {
      const { shiftPpm, nuclei } = phenyl.signals.find((signal) => signal.id === id)!;
      return lines.map(({ offsetHz, share }) => ({ offsetHz: shiftPpm * 60 + offsetHz, share: nuclei * share }));
    });
    // Source: test/reference/pattern/diagonalise.py; its J(ortho, para) of 1.3 Hz is the default here.
    const text = readFileSync(new URL('../reference/pattern/spinSystems.json', import.meta.url), 'utf8');
    const reference = (JSON.parse(text)["AA'BB'C phenyl"].lines as [number, number][]).map(([offsetHz, share]) => ({
      offsetHz,
      share,
    }));
    let worst = 0;
    for (let at = 430; at < 500; at += 0.1)
      worst = Math.max(worst, Math.abs(lorentzSum(drawn, 0.5, at) - lorentzSum(reference, 0.5, at)));
    const tallest = Math.max(...Array.from({ length: 700 }, (_, index) => lorentzSum(reference, 0.5, 430 + index / 10)));
    expect(worst / tallest).toBeLessThan(2e-3);
  });

  it('solves a symmetric molecule for one of its equal halves', () => {
    const half = speciesOf({ CH3: '1.21 (t, J = 7.0 Hz, 3H)', CH2: '3.48 (q, J = 7.0 Hz, 2H)' });
    const whole = speciesOf({ CH3: '1.21 (t, J = 7.0 Hz, 6H)', CH2: '3.48 (q, J = 7.0 Hz, 4H)' });
    expect(expectedLines(whole, 60)).toEqual(expectedLines(half, 60));
  });

  it('keeps a fluorine coupling first order on top of the exact pattern', () => {
    const species = speciesOf({ a: '7.60 (dd, J = 16.0, 5.3 Hz, 1H)', b: '6.60 (d, J = 16.0 Hz, 1H)' });
    const lines = expectedLines(species, 100_000).get('a')!;
    expect(lines.map((line) => Math.round(line.offsetHz * 10) / 10)).toEqual(
      [10.7, 5.4, -5.3, -10.6].map((v) => expect.closeTo(v, 0)),
    );
  });

  it('keeps what the method declares when `coupled` contradicts it, so that the data can say so', () => {
    const species = speciesOf({
      CH2: { listed: '4.12 (t, J = 7.1 Hz, 2H)', coupled: { CH3: 7.1 } },
      CH3: '1.25 (t, J = 7.1 Hz, 3H)',
    });
    expect(expectedLines(species, 400).get('CH2')).toEqual(firstOrderLines(species.signals[0]!.pattern));
  });

  it('declares no lines for a multiplet, and exact ones when its partners are named', () => {
    const plain = speciesOf({ CH2: '1.70-1.55 (m, 2H)', CH3: '0.95 (t, J = 7.4 Hz, 3H)' });
    expect(expectedLines(plain, 400).get('CH2')).toEqual([]);
    const named = speciesOf({ CH2: { listed: '1.70-1.55 (m, 2H)', coupled: { CH3: 7.4 } }, CH3: '0.95 (t, J = 7.4 Hz, 3H)' });
    expect(expectedLines(named, 400).get('CH2')!.length).toBeGreaterThan(3);
  });

  it('answers a chain too long to solve at once, signal by signal', () => {
    const species = speciesOf({
      c1: '0.90 (t, J = 7.0 Hz, 3H)',
      c2: { listed: '1.30 (sext, J = 7.0 Hz, 2H)', coupled: { c1: 7, c3: 7 } },
      c3: { listed: '1.35 (quint, J = 7.0 Hz, 2H)', coupled: { c4: 7 } },
      c4: { listed: '1.45 (quint, J = 7.0 Hz, 2H)', coupled: { c5: 7 } },
      c5: { listed: '1.60 (quint, J = 7.0 Hz, 2H)', coupled: { c6: 7 } },
      c6: '3.60 (t, J = 7.0 Hz, 2H)',
    });
    for (const own of expectedLines(species, 400).values()) {
      expect(own.reduce((sum, line) => sum + line.share, 0)).toBeCloseTo(1, 10);
      expect(own.length).toBeGreaterThan(2);
    }
  });

  it('names the signals that move together', () => {
    expect(coupledSignals(ethyl)).toEqual([['OCH2', 'CH3']]);
  });
});
