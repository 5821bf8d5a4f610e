import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { deriveSeries } from '../../src/series/deriveSeries.js';
import { renderSeriesCsv } from '../../src/series/renderSeriesCsv.js';
import { renderSeriesJson } from '../../src/series/renderSeriesJson.js';
import { pointRecord, seriesInputs, testMethod } from './buildPoints.js';

const method = testMethod();
const firstOrder = Array.from({ length: 20 }, (_, index) => [index * 1200, 1 - Math.exp(-2e-4 * index * 1200)] as const);

describe('deriveSeries', () => {
  it('gives the same bytes whatever the order in which points arrive', () => {
    const inputs = seriesInputs(method, firstOrder.slice(0, 6), 0.002);
    const expected = renderSeriesJson(deriveSeries(inputs));
    fc.assert(
      fc.property(fc.shuffledSubarray([...inputs.points], { minLength: 6, maxLength: 6 }), (points) => {
        expect(renderSeriesJson(deriveSeries({ ...inputs, points }))).toBe(expected);
      }),
      { numRuns: 40 },
    );
  });

  it('states conversion by the contract: n(to)/s over n(of) + n(to)/s, with the uncertainty that common terms leave', () => {
    const series = deriveSeries(seriesInputs(method, [[0, 0.25]], 0.01));
    const conversion = series.points[0]!.amounts!.conversion!;
    expect(conversion.value).toBeCloseTo(0.25, 12);
    // Derived: u = sqrt((R u)^2 + (C u)^2) / (C + R)^2 with C = 0.25, R = 0.75.
    expect(conversion.u).toBeCloseTo(0.01 * Math.hypot(0.75, 0.25), 12);
  });

  it('keeps the first by name of several files with the same bytes, and lists the others as duplicates', () => {
    const inputs = seriesInputs(method, [[0, 0.1]], 0.01);
    const record = inputs.points[0]!.record;
    const points = ['z.jdx', 'b.jdx', 'a.jdx'].map((file) => ({ file, record }));
    const series = deriveSeries({ ...inputs, points });
    expect(series.points.map(({ file }) => file)).toEqual(['a.jdx']);
    expect(series.inputs.map(({ file, status }) => [file, status])).toEqual([
      ['b.jdx', 'duplicate'],
      ['z.jdx', 'duplicate'],
    ]);
  });

  it('flags a point whose time comes from the file system, and points that share a time', () => {
    const inputs = seriesInputs(
      method,
      [
        [0, 0.1],
        [0, 0.12],
      ],
      0.01,
    );
    const { acquired: _acquired, ...timeless } = pointRecord(method, 0, 0.2, 0.01, 'late');
    const points = [...inputs.points, { file: 'late.jdx', record: timeless, modified: '2026-03-14T20:00:00Z' }];
    const codes = deriveSeries({ ...inputs, points }).points.map(({ flags }) => flags.map(({ code }) => code));
    expect(codes).toEqual([['time-shared'], ['time-shared'], ['time-from-file-system']]);
  });

  it('lets a signed-off change set a point aside, and the last word count', () => {
    const inputs = seriesInputs(method, firstOrder.slice(0, 5), 0.002);
    const point = inputs.points[2]!.record.sha256;
    const aside = { kind: 'set-aside', point, by: 'QA-2', because: 'tube was spinning', at: '2026-03-15T08:00:00Z' } as const;
    const withAside = deriveSeries({ ...inputs, amendments: [aside] }).points[2]!;
    expect([withAside.status, withAside.amounts]).toEqual(['set-aside', undefined]);
    const restored = deriveSeries({ ...inputs, amendments: [aside, { ...aside, kind: 'restore' }] }).points[2]!;
    expect(restored.status).toBe('accepted');
    expect(restored.flags.map(({ code }) => code)).toEqual(['amended-set-aside', 'amended-restore']);
  });

  it('flags an outlying point and does not drop it', () => {
    const data = firstOrder.map(([t, x], index) => [t, index === 9 ? x - 0.2 : x] as const);
    const series = deriveSeries(seriesInputs(method, data, 0.002));
    expect(series.points[9]!.status).toBe('flagged');
    expect(series.points[9]!.amounts!.conversion!.value).toBeCloseTo(data[9]![1], 9);
    expect(series.points.filter(({ flags }) => flags.some(({ code }) => code === 'outlying')).length).toBe(1);
  });

  it('reaches the same states at the same points when a night is replayed', () => {
    const data = Array.from({ length: 30 }, (_, index) => [index * 1800, 1 - Math.exp(-1.5e-4 * index * 1800)] as const);
    const whole = deriveSeries(seriesInputs(method, data, 0.001));
    const reached = whole.states.find(({ state }) => state === 'target-reached')!;
    const place = whole.points.findIndex(({ sha256 }) => sha256 === reached.since);
    const upTo = (count: number) => deriveSeries(seriesInputs(method, data.slice(0, count), 0.001)).states;
    expect(upTo(place).some(({ state }) => state === 'target-reached')).toBe(false);
    expect(upTo(place + 1)).toContainEqual(reached);
    // Common practice: the lower one-sided 95 % bound, on two points in a row.
    expect(data[place - 1]![1]).toBeGreaterThan(0.98);
  });

  it('says so when a reaction has stalled', () => {
    const data = Array.from({ length: 25 }, (_, index) => [index * 1800, 0.6 * (1 - Math.exp(-4e-4 * index * 1800))] as const);
    expect(deriveSeries(seriesInputs(method, data, 0.002)).states.map(({ state }) => state)).toContain('stalled');
  });
});

describe('series.json and series.csv', () => {
  const series = deriveSeries(seriesInputs(method, firstOrder.slice(0, 5), 0.002));

  it('are laid out as the contract says', () => {
    const json = JSON.parse(renderSeriesJson(series)) as Record<string, unknown>;
    expect(Object.keys(json).slice(0, 6)).toEqual(['format', 'program', 'run', 'method', 'points', 'inputs']);
    const point = (json.points as Record<string, unknown>[])[1]!;
    expect(Object.keys(point)).toEqual(
      expect.arrayContaining([
        'file',
        'sha256',
        'acquired',
        'elapsed_s',
        'status',
        'flags',
        'observe_mhz',
        'quality',
        'signals',
        'species',
        'conversion',
      ]),
    );
    expect((point.conversion as { value: number }).value).toBe(series.points[1]!.amounts!.conversion!.value);
    const [head, first] = renderSeriesCsv(series, method).split('\r\n');
    expect(head).toBe(
      'file,sha256,acquired,elapsed_s,status,conversion,conversion_u,a_mole_fraction,a_mole_fraction_u,b_mole_fraction,b_mole_fraction_u,flags',
    );
    expect(first!.split(',').length).toBe(head!.split(',').length);
  });

  it('F54: no cell can start a formula, and a negative number stays a number', () => {
    const inputs = seriesInputs(method, [[0, -0.01]], 0.002);
    const points = [{ ...inputs.points[0]!, file: '=HYPERLINK("http://127.0.0.1","x").jdx' }];
    const row = renderSeriesCsv(deriveSeries({ ...inputs, points }), method).split('\r\n')[1]!;
    expect(row.startsWith('"\'=HYPERLINK(""http')).toBe(true);
    expect(row).toMatch(/,-0\.01\d*,/);
  });
});
