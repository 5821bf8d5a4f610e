import { describe, expect, it } from 'vitest';
import { measureSignals } from '../../src/signal/measureSignals.js';
import { withSatellites } from '../../src/simulate/speciesLines.js';
import { buildMethod, buildSpecies } from '../builders/method.js';
import { makeTestSpectrum } from './makeTestSpectrum.js';

const observeMhz = 400;
const widthHz = 0.9;
const main = { shiftPpm: 3.77, area: 9, widthHz };
const method = buildMethod({ solvent: 'CDCl3', species: [buildSpecies('a', { OCH3: '3.77 (s, 9H)' })] });

function unassignedOf(lines: Parameters<typeof makeTestSpectrum>[0], seed = 3) {
  return measureSignals(makeTestSpectrum(lines, { observeMhz, noise: 0.001, seed }), method).unassigned;
}

describe('findUnassigned', () => {
  it('lists nothing when everything is declared, solvent, water, reference or a 13C satellite', () => {
    const background = [
      { shiftPpm: 0, area: 1, widthHz },
      { shiftPpm: 7.26, area: 0.5, widthHz },
      { shiftPpm: 1.56, area: 0.3, widthHz: 2 },
    ];
    const lines = [...withSatellites(main, { observeMhz, carbonCouplingHz: 143 }), ...background];
    for (const seed of [1, 2, 3, 4, 5]) expect(unassignedOf(lines, seed)).toEqual([]);
  });

  it('reports a line of satellite size without its mirror image as what it is', () => {
    const found = unassignedOf([main, { shiftPpm: 3.77 + 70 / observeMhz, area: 0.049, widthHz }]);
    expect(found).toHaveLength(1);
    expect(found[0]!.area).toBeCloseTo(0.049, 2);
  });

  it('groups lines into a multiplet with its coupling and suggests the solvent that the published table lists', () => {
    // Diethyl ether in CDCl3: 1.21 t, 3.48 q, J = 7 Hz (Fulmer et al., Organometallics 2010, 29, 2176, Table 1; transcribed).
    const lines = [main];
    for (const [shiftPpm, shares, area] of [
      [3.48, [1, 3, 3, 1], 0.2],
      [1.21, [1, 2, 1], 0.3],
    ] as const) {
      const total = shares.reduce((sum, share) => sum + share, 0);
      shares.forEach((share, k) => {
        const offset = ((shares.length - 1) / 2 - k) * 7;
        lines.push({ shiftPpm: shiftPpm + offset / observeMhz, area: (area * share) / total, widthHz });
      });
    }
    const found = unassignedOf(lines);
    expect(found.map(({ pattern }) => pattern)).toEqual(['q', 't']);
    expect(found.map(({ suggestion }) => suggestion)).toEqual(['diethyl ether CH2', 'diethyl ether CH3']);
    expect(found[0]!.couplingsHz![0]).toBeCloseTo(7, 0);
    expect(Math.abs(found[0]!.area - 0.2)).toBeLessThan(4 * found[0]!.u);
    expect(Math.abs(found[1]!.area - 0.3)).toBeLessThan(4 * found[1]!.u);
  });

  it('keeps to the sought significance: fewer than one false line in twenty empty spectra', () => {
    let falseLines = 0;
    for (let seed = 100; seed < 120; seed += 1) falseLines += unassignedOf([main], seed).length;
    expect(falseLines).toBeLessThanOrEqual(1);
  });
});
