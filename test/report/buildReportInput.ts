import type { Amounts } from '../../src/amount/amounts.js';
import type { Method, MethodSignal } from '../../src/method/method.js';
import type { ReportInput } from '../../src/report/reportInput.js';
import type { Series, SeriesPoint } from '../../src/series/series.js';
import type { MeasuredSignal } from '../../src/signal/measured.js';
import { makeRandom } from '../../src/simulate/random.js';

export interface FixtureSettings {
  readonly points: number;
  /** Replaces every free text that a user or a file may bring. */
  readonly text?: string;
  readonly hasFlags?: boolean;
}

const start = Date.UTC(2026, 2, 14, 19, 30);
const hash = (k: number) => (k * 2654435761).toString(16).padStart(8, '0').slice(-8).repeat(8);

/** An invented acetylation, decaying and growing by a first-order law, for tests of the report. Seeded: the same bytes each time. */
export function buildReportInput({ points, text, hasFlags = false }: FixtureSettings): ReportInput {
  const method = methodOf(text);
  const source = makeRandom(7);
  const random = () => source.uniform();
  const made = Array.from({ length: points }, (_, k) => pointOf(k, points, random, text, hasFlags));
  const series: Series = {
    run: text ?? 'BX-0417',
    method: { title: method.title, version: '3', sha256: hash(9) },
    points: made,
    inputs: hasFlags
      ? [
          {
            file: text ?? 'half.jdx',
            sha256: hash(77),
            status: 'set-aside',
            flags: [{ code: 'unreadable', message: text ?? 'cut in half' }],
          },
        ]
      : [],
    states: [{ state: 'running', since: 'run', evidence: `${points} usable time points` }],
    flags: [],
    ...(points >= 5 ? { kinetics: kineticsOf(points), forecast: forecastOf() } : {}),
    unassignedLines:
      points >= 5 ? [{ shiftPpm: 2.36, trend: 'grows', words: 's at 2.360 ppm grows (seen in 9 points)', areas: [] }] : [],
  };
  return {
    series,
    method,
    methodText: `kinetrail: method/1\ntitle: ${text ?? 'Acetylation of benzyl alcohol'}\n`,
    runFile: { batch: text ?? 'LOT-7731', notes: text ?? 'an invented batch' },
    head: { seq: points + 2, hash: hash(5) },
    createdUtc: '2026-03-15T04:10:00.000Z',
    program: '0.1.0',
    changes: hasFlags
      ? [
          {
            at: '2026-03-15T03:00:00Z',
            kind: 'set-aside',
            what: 'tp-002.jdx',
            by: text ?? 'QA-2',
            because: text ?? 'tube was shaken',
          },
        ]
      : [],
    exceptions: hasFlags ? [{ at: '2026-03-15T02:00:00Z', kind: 'late', message: `${text ?? 'tp-003.jdx'}: it came late` }] : [],
    files: made.map(({ file, sha256 }) => ({ file, sha256, state: 'measured' })),
    attachments: { seriesJson: '{"format":"kinetrail.series/1"}\n', ledgerText: '{"seq":1}\n' },
  };
}

function methodOf(text: string | undefined): Method {
  const signal = (species: string, id: string, shiftPpm: number, pattern: string): MethodSignal => ({
    id,
    key: `${species}/${id}`,
    shiftPpm,
    withinPpm: 0.05,
    pattern: { text: pattern, splittings: [], isBroad: false, isMultiplet: false },
    nuclei: 2,
    use: 'quantify',
    moves: false,
  });
  return {
    title: text ?? 'Acetylation of benzyl alcohol',
    version: '3',
    sha256: hash(9),
    nucleus: '1H',
    solvent: 'CDCl3',
    reference: { signal: 'tetramethylsilane', shiftPpm: 0 },
    species: [
      {
        id: 'alcohol',
        name: text ?? 'Benzyl alcohol',
        role: 'starting-material',
        stoichiometry: 1,
        signals: [signal('alcohol', 'CH2', 4.69, 's')],
      },
      { id: 'ester', name: 'Benzyl acetate', role: 'product', stoichiometry: 1, signals: [signal('ester', 'OCH2', 5.11, 's')] },
    ],
    conversion: { of: 'alcohol', to: 'ester', target: 0.98 },
    limits: [{ species: 'alcohol', quantity: 'mole-fraction', atMost: 0.02 }],
    purity: { of: 'ester', atLeast: 0.95 },
    processing: { lineBroadeningHz: 0.3, zeroFilling: 2, phase: 'automatic', baseline: 'automatic' },
    acquisition: {},
    kinetics: {},
    quality: {},
    input: {},
  };
}

function pointOf(k: number, count: number, random: () => number, text: string | undefined, hasFlags: boolean): SeriesPoint {
  const elapsedS = k * (30_000 / Math.max(10, count));
  const value = 1 - Math.exp(-elapsedS / 8000) + 0.002 * (random() - 0.5);
  const status = hasFlags && k % 7 === 2 ? 'set-aside' : hasFlags && k % 4 === 1 ? 'flagged' : 'accepted';
  const flags =
    status === 'accepted' ? [] : [{ code: 'pattern-differs', signal: 'ester/OCH2', message: text ?? 'the pattern differs' }];
  const acquired = new Date(start + 1000 * elapsedS).toISOString();
  const file = `${text ?? 'tp'}-${String(k).padStart(3, '0')}.jdx`;
  const signals = [signalOf('alcohol/CH2', 4.69, 1 - value, random, text), signalOf('ester/OCH2', 5.11, value, random, text)];
  return {
    file,
    sha256: hash(k + 11),
    acquired,
    elapsedS,
    status,
    flags,
    record: {
      format: 'kinetrail.point/1',
      program: '0.1.0',
      sha256: hash(k + 11),
      methodSha256: hash(9),
      title: text ?? file,
      acquired,
      acquiredSource: 'LONGDATE',
      dataSha256: hash(k + 500),
      kind: 'fid',
      status,
      flags,
      quality: { signalToNoise: 812.3, phaseDeg: [12.3, -4.1], noise: 0.01 },
      reference: { used: 'tetramethylsilane', shiftPpm: 0, movedPpm: 0.0012 },
      steps: [{ step: 'window', parameters: { shape: 'exponential', line_broadening_hz: 0.3 } }],
      measurement: {
        signals,
        unassigned: [],
        solvents: [],
        signalToNoise: 812.3,
        lineShape: { widthHz: 0.9, lorentzShare: 0.9, asymmetry: 0 },
        flags: [],
      },
      overview: overviewOf(value),
    },
    amounts: amountsOf(value),
  };
}

function signalOf(key: string, shiftPpm: number, area: number, random: () => number, text: string | undefined): MeasuredSignal {
  const stepPpm = 0.0006;
  const places = Array.from({ length: 160 }, (_, k) => (k - 80) * stepPpm);
  const fit = places.map((offset) => 1 / (1 + (offset / 0.002) ** 2));
  const data = fit.map((height) => height + 0.02 * (random() - 0.5));
  return {
    key,
    species: key.split('/')[0]!,
    use: 'quantify',
    nuclei: 2,
    shiftPpm,
    widthHz: 0.91,
    area,
    u: 0.004,
    verdict: 'matches',
    declared: 's',
    u0: 0.001,
    fittedWith: [],
    words: text ?? 'singlet as expected; 6 % left over at 4.105 ppm',
    strip: {
      firstPpm: shiftPpm + 80 * stepPpm,
      stepPpm,
      data,
      fit,
      scale: Math.max(0.001, area),
      sticks: [{ shiftPpm, height: 1, signal: key }],
    },
  };
}

function overviewOf(value: number) {
  const heights = Array.from({ length: 800 }, (_, k) => (k === 300 ? 1 - value : k === 280 ? value : 0.01));
  return { firstPpm: 10, lastPpm: 0, low: heights.map((height) => -0.01 * height), high: heights };
}

function amountsOf(value: number): Amounts {
  const fraction = (amount: number) => ({ amount, u: 0.002, moleFraction: amount, moleFractionU: 0.0011, detection: 0.0012 });
  const line = { quantity: 'mass of the sample', value: 24.113, u: 0.02, unit: 'mg', sensitivity: -0.04, contribution: 0.0008 };
  return {
    unit: 'mmol/g',
    species: { alcohol: fraction(1 - value), ester: fraction(value) },
    conversion: { value, u: 0.0011 },
    massBalance: { value: 0.998, u: 0.004 },
    purity: {
      result: { value: 0.9731, u: 0.0011 },
      lines: [line, { ...line, quantity: 'ratio of areas', contribution: 0.0007 }],
      coverageFactor: 1.96,
      expandedU: 0.0022,
    },
    residualSolvents: [
      { name: 'Toluene', cas: '108-88-3', ppm: 912, u: 30, limitPpm: 890, class: 2, verdict: 'near' },
      { name: 'Hexane', cas: '110-54-3', limitPpm: 290, class: 2, verdict: 'not-detected', detectablePpm: 120 },
    ],
    flags: [],
  };
}

function kineticsOf(points: number): NonNullable<Series['kinetics']> {
  const elapsedS = Array.from({ length: 60 }, (_, k) => k * 600);
  const value = elapsedS.map((t) => 1 - Math.exp(-t / 8000));
  const parameters = { k_per_s: { value: 1.25e-4, u: 1e-6 } };
  return {
    model: 'first-order',
    parameters,
    weights: { 'first-order': 0.98 },
    fits: [{ model: 'first-order', parameters, aicc: -210.4, weight: 0.98, residuals: Array(points).fill(0), runTestP: 0.41 }],
    words: 'first order describes the conversion (weight 0.98)',
    curve: { elapsedS, value, low: value.map((v) => v - 0.006), high: value.map((v) => v + 0.006) },
  };
}

function forecastOf(): NonNullable<Series['forecast']> {
  return { target: 0.98, elapsedS: 31_300, lowS: 30_900, highS: 31_800, confidence: 0.95, words: 'by the first-order law' };
}
