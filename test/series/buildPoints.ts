import type { Method, RunFile } from '../../src/method/method.js';
import { readMethod } from '../../src/method/readMethod.js';
import type { PointRecord } from '../../src/point/pointRecord.js';
import type { SeriesInputs } from '../../src/series/seriesInputs.js';
import type { MeasuredSignal } from '../../src/signal/measured.js';

export const methodText = `kinetrail: method/1
title: A to B
version: "1"
nucleus: 1H
reference: {signal: tetramethylsilane}
species:
  - {id: a, role: starting-material, signals: [{id: H, listed: "5.0 (s, 1H)"}]}
  - {id: b, role: product, signals: [{id: H, listed: "4.0 (s, 1H)"}]}
conversion: {of: a, to: b, target: 0.98}
limits: [{species: a, quantity: mole-fraction, at_most: 0.02}]
`;

export function testMethod(text = methodText): Method {
  const method = readMethod(text, 'test.yaml');
  if (!method.ok) throw new Error(JSON.stringify(method.problem));
  return method.value;
}

/** A point record whose areas say a given conversion with a given uncertainty. */
export function pointRecord(method: Method, elapsedS: number, conversion: number, u: number, mark: string): PointRecord {
  const signal = (key: string, area: number): MeasuredSignal => ({
    key,
    species: key.slice(0, key.indexOf('/')),
    use: 'quantify',
    nuclei: 1,
    shiftPpm: 5,
    widthHz: 1,
    area,
    u,
    u0: u,
    verdict: 'matches',
    declared: 's',
    fittedWith: [],
    words: 'singlet as expected',
  });
  return {
    format: 'kinetrail.point/1',
    program: '0.1.0',
    sha256: mark.padStart(64, '0'),
    methodSha256: method.sha256,
    title: mark,
    acquired: new Date(Date.UTC(2026, 2, 14, 18) + elapsedS * 1000).toISOString(),
    acquiredSource: 'long-date',
    dataSha256: mark,
    kind: 'fid',
    observeMhz: 400,
    status: 'accepted',
    flags: [],
    steps: [],
    quality: { signalToNoise: 500, phaseDeg: [0, 0], noise: 1 },
    measurement: {
      signals: [signal('a/H', 1 - conversion), signal('b/H', conversion)],
      unassigned: [],
      solvents: [],
      signalToNoise: 500,
      lineShape: { widthHz: 1, lorentzShare: 1, asymmetry: 0 },
      flags: [],
    },
  };
}

export function seriesInputs(
  method: Method,
  data: readonly (readonly [elapsedS: number, conversion: number])[],
  u: number,
  runFile: RunFile = {},
): SeriesInputs {
  const points = data.map(([elapsedS, conversion], index) => {
    const mark = `p${String(index).padStart(3, '0')}`;
    return { file: `${mark}.jdx`, record: pointRecord(method, elapsedS, conversion, u, mark) };
  });
  return { run: 'R', method, runFile: { started: '2026-03-14T18:00:00Z', ...runFile }, points, inputs: [], amendments: [] };
}
