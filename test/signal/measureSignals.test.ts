import { describe, expect, it } from 'vitest';
import { measureSignals } from '../../src/signal/measureSignals.js';
import { speciesLines } from '../../src/simulate/speciesLines.js';
import { buildMethod, buildSpecies } from '../builders/method.js';
import { makeTestSpectrum } from './makeTestSpectrum.js';

const ester = buildSpecies('ester', {
  OCH2: '4.12 (q, J = 7.1 Hz, 2H)',
  acetyl: '2.04 (s, 3H)',
  CH3: '1.26 (t, J = 7.1 Hz, 3H)',
});
const method = buildMethod({ species: [ester] });

describe('measureSignals', () => {
  it('measures a clean ethyl ester within three standard uncertainties and says that every pattern matches', () => {
    const lines = speciesLines(method, { ester: 1 }, { observeMhz: 400, widthHz: 0.9 });
    const spectrum = makeTestSpectrum(lines, { noise: 0.002, seed: 4 });
    const { signals, flags } = measureSignals(spectrum, method);
    expect(signals.map(({ verdict }) => verdict)).toEqual(['matches', 'matches', 'matches']);
    expect(flags).toEqual([]);
    for (const [index, nuclei] of [2, 3, 3].entries()) {
      const { area, u } = signals[index]!;
      expect(Math.abs(area - nuclei)).toBeLessThan(3 * u);
      expect(u / area).toBeLessThan(0.01);
    }
  });
});
