import { describe, expect, it } from 'vitest';
import { deriveSeries } from '../../src/series/deriveSeries.js';
import { deriveStates } from '../../src/series/deriveStates.js';
import type { RunState } from '../../src/series/series.js';
import type { SeriesInputs } from '../../src/series/seriesInputs.js';
import { makeRandom } from '../../src/simulate/random.js';
import { methodText, seriesInputs, testMethod } from './buildPoints.js';

const method = testMethod();

/** The states after each point, as a watcher would have derived them. */
function replay(inputs: SeriesInputs): RunState[][] {
  const { points } = deriveSeries(inputs);
  return points.map((_, index) => deriveStates(points.slice(0, index + 1), inputs.method, inputs.runFile));
}

const stateKey = ({ state, since }: RunState) => `${state} ${since}`;

/** Every event that a replay sees, in order, each once. */
function eventsOf(states: readonly RunState[][]): string[] {
  return [...new Set(states.flatMap((list) => list.filter(({ state }) => state !== 'running').map(stateKey)))];
}

/** Adds an unassigned line to every point. */
function withLine(inputs: SeriesInputs, areaAt: (index: number) => number | undefined, u = 0.0003): SeriesInputs {
  const points = inputs.points.map((point, index) => {
    const area = areaAt(index);
    const { measurement } = point.record;
    if (area === undefined || !measurement) return point;
    const unassigned = [{ shiftPpm: 2.36 + 0.0004 * index, area, u, pattern: 's', suggestion: 'toluene CH3' }];
    return { ...point, record: { ...point.record, measurement: { ...measurement, unassigned } } };
  });
  return { ...inputs, points };
}

function plateau(seed: number, end: number, u: number, count = 40): (readonly [number, number])[] {
  const random = makeRandom(seed);
  return Array.from({ length: count }, (_, index) => {
    const t = index * 900;
    return [t, end * (1 - Math.exp(-4e-4 * t)) + u * random.normal()] as const;
  });
}

it('a night derived again after every point sees what the finished series says of its first points', () => {
  const inputs = seriesInputs(method, plateau(3, 0.6, 0.003), 0.003);
  const states = replay(inputs);
  for (const count of [8, 16, 24, 32])
    expect(deriveSeries({ ...inputs, points: inputs.points.slice(0, count) }).states).toEqual(states[count - 1]);
});

describe('stalled', () => {
  it('is told once a night: it begins at one point and keeps it, also with noise', () => {
    for (let seed = 1; seed <= 8; seed += 1) {
      const states = replay(seriesInputs(method, plateau(seed, 0.6, 0.003), 0.003));
      expect(states.at(-1)!.map(({ state }) => state)).toContain('stalled');
      expect(eventsOf(states).length).toBe(1);
    }
  });

  it('is not said of a slow reaction that noisy data cannot follow from point to point', () => {
    for (let seed = 1; seed <= 8; seed += 1) {
      const random = makeRandom(seed);
      const data = Array.from({ length: 40 }, (_, index) => {
        const t = index * 900;
        return [t, 1 - Math.exp(-4e-5 * t) + 0.02 * random.normal()] as const;
      });
      expect(eventsOf(replay(seriesInputs(method, data, 0.02)))).toEqual([]);
    }
  });

  it('is not said before anything has begun, unless the method says how long to wait', () => {
    const data = Array.from({ length: 12 }, (_, index) => [index * 900, 0.001] as const);
    expect(deriveSeries(seriesInputs(method, data, 0.002)).states[0]!.state).toBe('running');
    const waiting = testMethod(`${methodText}kinetics: {stalled_after_min: 60}\n`);
    expect(deriveSeries(seriesInputs(waiting, data, 0.002)).states[0]!.state).toBe('stalled');
  });
});

describe('a new unassigned signal', () => {
  const run = seriesInputs(method, plateau(1, 0.9, 0.001, 20), 0.001);

  it('is told when it was not there at first, is seen again and again, and grows', () => {
    const states = replay(withLine(run, (index) => (index >= 8 ? 0.001 * (index - 6) : undefined)));
    const events = eventsOf(states).filter((event) => event.startsWith('new-signal'));
    // First seen at point 8 with 0.002; three sights and 3 u of growth are there at point 10.
    expect(events).toEqual([`new-signal ${run.points[10]!.record.sha256}`]);
    const evidence = states.at(-1)!.find(({ state }) => state === 'new-signal')!.evidence;
    expect(evidence).toMatch(/^s at 2\.364 ppm .* from 0\.20 % to 0\.40 % of the known area; toluene CH3 lies there$/);
  });

  it('is not told of a line that was there from the start, of one that stays, or of a single sight', () => {
    const always = withLine(run, (index) => 0.001 * (index + 2));
    const steady = withLine(run, (index) => (index >= 8 ? 0.004 : undefined));
    const single = withLine(run, (index) => (index === 8 ? 0.02 : undefined));
    for (const inputs of [always, steady, single]) expect(eventsOf(replay(inputs))).toEqual([]);
  });
});

it('a balance that is lost on two points in a row is told, with what may be the cause', () => {
  const standard = testMethod(
    methodText
      .replace(
        'conversion:',
        '  - {id: std, role: internal-standard, concentration_mol_per_l: 0.1, signals: [{id: H, listed: "6.0 (s, 1H)"}]}\nconversion:',
      )
      .replace(/limits:.*\n/, ''),
  );
  const run = seriesInputs(standard, plateau(1, 0.9, 0, 12), 0.001);
  const lossFrom = (start: number): SeriesInputs => ({
    ...run,
    points: run.points.map((point, index) => {
      const measurement = point.record.measurement!;
      const scale = index >= start ? 0.85 : 1;
      const signals = measurement.signals.map((signal) => ({ ...signal, area: signal.area * scale }));
      const own = { ...signals[0]!, key: 'std/H', species: 'std', area: 1 };
      return { ...point, record: { ...point.record, measurement: { ...measurement, signals: [...signals, own] } } };
    }),
  });
  const states = replay(lossFrom(6));
  expect(eventsOf(states)).toEqual([`balance-lost ${run.points[7]!.record.sha256}`]);
  expect(states.at(-1)![0]!.evidence).toMatch(/85\.0 %.*precipitation/);
  expect(eventsOf(replay(lossFrom(99)))).toEqual([]);
});

it('two limits broken at the same point are one event with both reasons', () => {
  const strict = testMethod(
    methodText.replace(
      /limits:.*\n/,
      'limits: [{species: b, quantity: mole-fraction, at_most: 0.5}, {species: a, quantity: conversion, at_most: 0.5}]\n',
    ),
  );
  const data = [0.2, 0.3, 0.6, 0.7].map((x, index) => [index * 900, x] as const);
  const { states } = deriveSeries(seriesInputs(strict, data, 0.001));
  expect(states.map(stateKey)).toEqual([`limit-broken ${'p002'.padStart(64, '0')}`]);
  expect(states[0]!.evidence).toMatch(/mole fraction of b is 0\.6.*; conversion is 0\.6/);
});
