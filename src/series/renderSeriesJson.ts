import type { Flag } from '../base/flag.js';
import { programVersion } from '../base/version.js';
import type { Series, SeriesInput, SeriesPoint } from './series.js';

/**
 * `series.json` as the contract's section 6 lays it down: absent stays absent, numbers read back bit for bit, one point a line.
 *
 * @returns text with a final line end; the same series gives the same bytes
 */
export function renderSeriesJson(series: Series): string {
  const { kinetics, forecast, purity } = series;
  const parts: [string, string][] = [
    ['format', JSON.stringify('kinetrail.series/1')],
    ['program', JSON.stringify(programVersion)],
    ['run', JSON.stringify(series.run)],
    ['method', JSON.stringify({ title: series.method.title, version: series.method.version, sha256: series.method.sha256 })],
    ['points', list(series.points.map(pointJson))],
    ['inputs', list(series.inputs.map(inputJson))],
  ];
  if (kinetics)
    parts.push([
      'kinetics',
      plain({ model: kinetics.model, parameters: kinetics.parameters, weights: kinetics.weights, words: kinetics.words }),
    ]);
  if (forecast) {
    const { target, elapsedS, lowS, highS, confidence, words } = forecast;
    parts.push(['forecast', plain({ target, elapsed_s: elapsedS, low_s: lowS, high_s: highS, confidence, words })]);
  }
  if (purity) parts.push(['purity', plain({ mass_fraction: purity.massFraction, u: purity.u, replicates: purity.replicates })]);
  parts.push(['states', list(series.states.map(({ state, since, evidence }) => plain({ state, since, evidence })))]);
  const lines = series.unassignedLines ?? [];
  if (lines.length > 0)
    parts.push([
      'unassigned_lines',
      list(lines.map(({ shiftPpm, trend, words }) => plain({ shift_ppm: shiftPpm, trend, words }))),
    ]);
  return `{\n${parts.map(([key, value]) => `  ${JSON.stringify(key)}: ${value}`).join(',\n')}\n}\n`;
}

function list(items: readonly string[]): string {
  return items.length === 0 ? '[]' : `[\n${items.map((item) => `    ${item}`).join(',\n')}\n  ]`;
}

/** JSON without what is absent; a number that is not finite counts as absent ("nothing is ever filled in"). */
function plain(value: object): string {
  return JSON.stringify(value, (_, item: unknown) => (typeof item === 'number' && !Number.isFinite(item) ? undefined : item));
}

function flagsJson(flags: readonly Flag[]): object[] {
  return flags
    .filter(({ weight }) => weight !== 'note')
    .map(({ code, signal, message }) => ({ code, ...(signal !== undefined ? { signal } : {}), message }));
}

function inputJson({ file, sha256, status, flags }: SeriesInput): string {
  return plain({ file, sha256, status, flags: flagsJson(flags) });
}

function pointJson(point: SeriesPoint): string {
  const { record, amounts } = point;
  const { quality, measurement } = record;
  const isUsed = point.status !== 'set-aside';
  return plain({
    file: point.file,
    sha256: point.sha256,
    block: point.block,
    acquired: point.acquired,
    elapsed_s: point.elapsedS,
    status: point.status,
    flags: flagsJson(point.flags),
    observe_mhz: record.observeMhz,
    quality: quality && {
      signal_to_noise: quality.signalToNoise,
      reference_width_hz: quality.referenceWidthHz,
      phase_deg: quality.phaseDeg,
      onset_points: quality.onsetPoints,
      noise: quality.noise,
    },
    signals: measurement && Object.fromEntries(measurement.signals.map((signal) => [signal.key, signalJson(signal)])),
    species:
      amounts && isUsed
        ? Object.fromEntries(Object.entries(amounts.species).map(([id, species]) => [id, speciesJson(species)]))
        : undefined,
    amount_unit: amounts && isUsed ? amounts.unit : undefined,
    conversion: isUsed ? amounts?.conversion : undefined,
    yield: isUsed ? amounts?.yield : undefined,
    selectivity: isUsed ? amounts?.selectivity : undefined,
    mass_balance: isUsed ? amounts?.massBalance : undefined,
    unassigned: measurement?.unassigned.map(({ shiftPpm, area, u, pattern, couplingsHz, suggestion }) => ({
      shift_ppm: shiftPpm,
      area,
      u,
      pattern,
      couplings_hz: couplingsHz,
      suggestion,
    })),
    residual_solvents: isUsed
      ? amounts?.residualSolvents?.map((solvent) => ({
          name: solvent.name,
          cas: solvent.cas,
          ppm: solvent.ppm,
          u: solvent.u,
          limit_ppm: solvent.limitPpm,
          class: solvent.class,
          verdict: solvent.verdict,
          detectable_ppm: solvent.detectablePpm,
        }))
      : undefined,
    purity: isUsed && amounts?.purity ? { mass_fraction: amounts.purity.result.value, u: amounts.purity.result.u } : undefined,
  });
}

type Signal = NonNullable<SeriesPoint['record']['measurement']>['signals'][number];

function signalJson(signal: Signal): object {
  const { shiftPpm, widthHz, area, u, verdict, declared, found, couplingsHz, leftOver, areaUpper95, words } = signal;
  return {
    shift_ppm: shiftPpm,
    width_hz: widthHz,
    area,
    u,
    verdict,
    declared,
    found,
    couplings_hz: couplingsHz,
    left_over: leftOver && { share: leftOver.share, u: leftOver.u, shift_ppm: leftOver.shiftPpm },
    area_upper_95: areaUpper95,
    words,
  };
}

type Species = NonNullable<SeriesPoint['amounts']>['species'][string];

function speciesJson({ amount, u, moleFraction, moleFractionU, below, detection, quantitation }: Species): object {
  return { amount, u, mole_fraction: moleFraction, mole_fraction_u: moleFractionU, below, detection, quantitation };
}
