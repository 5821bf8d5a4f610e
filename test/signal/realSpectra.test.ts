import { readdirSync, readFileSync } from 'node:fs';
import { describe, expect, it } from 'vitest';
import { decodeJcamp } from '../../src/decode/decodeJcamp.js';
import type { Method } from '../../src/method/method.js';
import { measureSignals } from '../../src/signal/measureSignals.js';
import { makeSpectrum } from '../../src/spectrum/makeSpectrum.js';
import { buildMethod, buildSpecies } from '../builders/method.js';

const data = new URL('../data/', import.meta.url);
const runs = new URL('../../sample-runs/', import.meta.url);

function measureFile(file: string, method: Method, base = data) {
  const decoded = decodeJcamp(readFileSync(new URL(file, base)), file, {});
  if (!decoded.ok) throw new Error(decoded.problem.message);
  const block = decoded.value[0]!;
  if (!block.ok) throw new Error(block.problem.message);
  const spectrum = makeSpectrum(block.value, method);
  if (!spectrum.ok) throw new Error(spectrum.problem.message);
  return measureSignals(spectrum.value, method);
}

// Listed data of the four compounds: common practice. Files and licences: test/data/PROVENANCE.csv.
const crotonate = {
  CHb: '6.96 (dq, J = 15.5, 6.9 Hz, 1H)',
  CHa: '5.84 (dq, J = 15.5, 1.7 Hz, 1H)',
  OCH2: '4.18 (q, J = 7.1 Hz, 2H)',
  CH3C: '1.87 (dd, J = 6.9, 1.7 Hz, 3H)',
  CH3: '1.28 (t, J = 7.1 Hz, 3H)',
};
const propiolate = {
  OCH2: '4.25 (q, J = 7.1 Hz, 2H)',
  CH: '2.91 (s, 1H)',
  CH3: '1.32 (t, J = 7.1 Hz, 3H)',
};

function methodOf(id: string, listed: Readonly<Record<string, string>>, pin: string): Method {
  return buildMethod({ solvent: 'CDCl3', reference: { signal: `${id}/${pin}` }, species: [buildSpecies(id, listed)] });
}

describe('real FIDs under the right method', () => {
  it('finds every pattern of ethyl crotonate, with the couplings that chemists list', () => {
    const { signals } = measureFile('compounds/ethyl-crotonate/fid.dx', methodOf('crotonate', crotonate, 'CH3'));
    expect(signals.map(({ verdict }) => verdict)).toEqual(['matches', 'matches', 'matches', 'matches', 'matches']);
    // Usual ranges: trans-vinyl 14-17 Hz, vinyl to allyl 6-8 Hz, allylic 1-2.5 Hz, ethyl 6.8-7.4 Hz (common practice).
    const [vinyl, allylic] = signals[1]!.couplingsHz!;
    expect(vinyl).toBeGreaterThan(14);
    expect(vinyl).toBeLessThan(17);
    expect(allylic).toBeGreaterThan(1);
    expect(allylic).toBeLessThan(2.5);
    expect(signals[2]!.couplingsHz![0]).toBeGreaterThan(6.8);
    expect(signals[2]!.couplingsHz![0]).toBeLessThan(7.4);
  });

  it('finds every pattern of ethyl propiolate, and areas in proton ratio within 3 percent', () => {
    const { signals } = measureFile('compounds/ethyl-propiolate/fid.dx', methodOf('propiolate', propiolate, 'CH3'));
    expect(signals.map(({ words }) => words)).toEqual(['quartet as expected', 'singlet as expected', 'triplet as expected']);
    const perProton = signals.map(({ area, nuclei }) => area / nuclei);
    const mean = perProton.reduce((sum, value) => sum + value, 0) / 3;
    for (const value of perProton) expect(Math.abs(value / mean - 1)).toBeLessThan(0.03);
  });
});

describe('real FIDs under a deliberately wrong method', () => {
  it('does not accept a triplet for the quartet of an ethyl ester', () => {
    const wrong = { ...propiolate, OCH2: '4.25 (t, J = 7.1 Hz, 2H)' };
    const { signals } = measureFile('compounds/ethyl-propiolate/fid.dx', methodOf('propiolate', wrong, 'CH3'));
    expect(signals[0]).toMatchObject({ verdict: 'differs', found: 'q' });
  });

  it('does not accept a singlet for the triplet of an ethyl ester, nor a doublet for a doublet of quartets', () => {
    const wrong = { ...crotonate, CHa: '5.84 (d, J = 15.5 Hz, 1H)', CH3: '1.28 (s, 3H)' };
    const { signals } = measureFile('compounds/ethyl-crotonate/fid.dx', methodOf('crotonate', wrong, 'OCH2'));
    expect(signals[1]!.verdict).toBe('differs');
    expect(signals[4]!.verdict).not.toBe('matches');
  });
});

describe('the real 19F run', () => {
  const species = (id: string, listed: string, within: number) => buildSpecies(id, { F: listed }, {}, { withinPpm: within });
  const method = buildMethod({
    nucleus: '19F',
    reference: { signal: 'standard/F' },
    species: [
      species('reactant', '-62.9 (s, 3F)', 0.25),
      species('product', '-62.2 (s, 3F)', 0.25),
      species('standard', '-113.2 (s, 1F)', 0.5),
    ],
  });
  const folder = 'addition-19f/';
  const table = readFileSync(new URL('truth/addition-19f-trapezoid.csv', runs), 'utf8').trim().split('\n').slice(1);

  it('agrees with areas computed independently by the trapezoid rule within 2 percent, small product areas within their u', () => {
    for (const file of readdirSync(new URL(folder, runs)).filter((name) => name.endsWith('.jdx'))) {
      const row = table.map((line) => line.split(',').map(Number)).find(([minutes]) => minutes === Number.parseInt(file, 10))!;
      const { signals } = measureFile(folder + file, method, runs);
      const [reactant, product, standard] = signals.map(({ area, nuclei }) => area / nuclei);
      expect(Math.abs((0.11 * reactant!) / standard! / row[4]! - 1), `${file} reactant`).toBeLessThan(0.02);
      // The trapezoid of the small product area carries its baseline: 2 % or 0.003 mol/L.
      const found = (0.11 * product!) / standard!;
      expect(Math.abs(found - row[5]!), `${file} product`).toBeLessThan(Math.max(0.003, 0.02 * row[5]!));
      expect(signals.map(({ verdict }) => verdict)).toEqual(['matches', 'matches', 'matches']);
    }
  });
});
