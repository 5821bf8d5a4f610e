import { readMethod } from '../../dist/method/readMethod.js';
import { makeRandom } from '../../dist/simulate/random.js';
import { speciesLines } from '../../dist/simulate/speciesLines.js';
import { synthesizeFid } from '../../dist/simulate/synthesizeFid.js';
import { writeJcamp } from '../../dist/simulate/writeJcamp.js';

const methodText = `kinetrail: method/1
title: Bench case, ten diagnostic signals
version: "1"
nucleus: 1H
solvent: CDCl3
reference: {signal: tetramethylsilane, shift: 0.0}
species:
  - id: start
    name: Butyl ester
    role: starting-material
    signals:
      - {id: a, listed: "4.06 (t, J = 6.6 Hz, 2H)"}
      - {id: b, listed: "1.60 (quint, J = 6.8 Hz, 2H)"}
      - {id: c, listed: "1.37 (sext, J = 7.4 Hz, 2H)"}
      - {id: d, listed: "0.93 (t, J = 7.4 Hz, 3H)"}
      - {id: e, listed: "2.03 (s, 3H)"}
  - id: end
    name: Isopropyl compound
    role: product
    signals:
      - {id: a, listed: "5.00 (sept, J = 6.3 Hz, 1H)"}
      - {id: b, listed: "1.23 (d, J = 6.3 Hz, 6H)"}
      - {id: c, listed: "6.90 (dd, J = 15.6, 7.0 Hz, 1H)"}
      - {id: d, listed: "5.80 (d, J = 15.6 Hz, 1H)"}
      - {id: e, listed: "3.70 (s, 3H)"}
conversion: {of: start, to: end, target: 0.98}
`;

/** One 65,536-point FID at 500 MHz with ten diagnostic signals, delayed onset, random phase and noise; seed 11. */
export function benchCase() {
  const method = readMethod(methodText, 'bench.yaml');
  if (!method.ok) throw new Error(JSON.stringify(method.problem));
  const random = makeRandom(11);
  const observeMhz = 500.13;
  const settings = { observeMhz, widthHz: 0.8, carbonCouplingHz: 128 };
  const lines = [
    ...speciesLines(method.value, { start: 0.4, end: 0.6 }, settings),
    { shiftPpm: 0, area: 0.5, widthHz: 0.8 },
    { shiftPpm: 7.26, area: 0.3, widthHz: 0.8 },
  ];
  const fid = synthesizeFid(
    lines,
    { observeMhz, carrierPpm: 5, spectralWidthHz: 8012.82, points: 65_536, phaseDeg: 73, onsetPoints: 67.98, noise: 0.02 },
    random,
  );
  const fileText = writeJcamp({
    kind: 'fid',
    title: 'bench',
    nucleus: '1H',
    observeMhz,
    dwellS: fid.dwellS,
    real: fid.real,
    imag: fid.imag,
    acquired: '2026-03-14T19:31:00Z',
    solventName: 'CDCl3',
  });
  return { methodText, fileText, fid };
}
