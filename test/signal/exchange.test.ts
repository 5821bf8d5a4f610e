import { readFileSync } from 'node:fs';
import { join } from 'node:path';
import { expect, it } from 'vitest';
import { readMethod } from '../../src/method/readMethod.js';
import { measureSignals } from '../../src/signal/measureSignals.js';
import { makeRandom } from '../../src/simulate/random.js';
import { speciesLines } from '../../src/simulate/speciesLines.js';
import { synthesizeFid } from '../../src/simulate/synthesizeFid.js';
import { makeSpectrum } from '../../src/spectrum/makeSpectrum.js';

// Two doublets 12 Hz apart, J 6.1 and 6.3 Hz, areas 1 to 49: noise must not decide which is which.
it.each([3, 7, 23])('does not take a small doublet for the large one beside it (seed %i)', (seed) => {
  const file = join(import.meta.dirname, '..', '..', 'templates', 'methods', 'esterification-1h.yaml');
  const method = readMethod(readFileSync(file, 'utf8'), file);
  if (!method.ok) throw new Error('method');
  const random = makeRandom(seed);
  const [observeMhz, widthHz, points, spectralWidthHz] = [400, 1, 16_384, 4000];
  const lines = [
    ...speciesLines(method.value, { alcohol: 0.02, ester: 0.98, standard: 0.5 }, { observeMhz, widthHz, carbonCouplingHz: 128 }),
    { shiftPpm: 0, area: 0.5, widthHz },
  ];
  const noise = (2 / Math.PI / 200) * (spectralWidthHz / Math.sqrt(points)) * Math.SQRT2;
  const { real, imag, dwellS } = synthesizeFid(
    lines,
    { observeMhz, carrierPpm: 3, spectralWidthHz, points, phaseDeg: random.between(-180, 180), noise },
    random,
  );
  const spectrum = makeSpectrum(
    {
      kind: 'fid',
      title: '',
      nucleus: '1H',
      observeMhz,
      real,
      imag,
      dwellS,
      spectralWidthHz,
      acquiredSource: 'none',
      dataSha256: '',
      flags: [],
    },
    method.value,
  );
  if (!spectrum.ok) throw new Error(spectrum.problem.message);
  const area = (key: string) => measureSignals(spectrum.value, method.value).signals.find((signal) => signal.key === key)!.area;
  // Truth: 6 x 0.02 and 6 x 0.98, less 1.07 % in satellites; 20 % and 2 % are some ten standard uncertainties.
  expect(Math.abs(area('alcohol/CH3') - 0.12)).toBeLessThan(0.024);
  expect(Math.abs(area('ester/CH3') / 5.88 - 1)).toBeLessThan(0.02);
});
