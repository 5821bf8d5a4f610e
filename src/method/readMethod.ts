import { fail, ok, type Problem, type Result } from '../base/result.js';
import { sha256 } from '../base/sha256.js';
import { checkReferences } from './checkReferences.js';
import type { Limit, Method, Processing } from './method.js';
import { nearestWord } from './nearestWord.js';
import { qualityDefaults } from './qualityDefaults.js';
import { readSpecies } from './readSpecies.js';
import { readYaml, type YamlFile } from './readYaml.js';
import { type MethodYaml, methodSchema } from './schema.js';
import { knownSolvents, nearestSolvent, solventName } from './solvents.js';

/**
 * Reads a method file: syntax, keys and values against the schema, then what only the whole can tell. Every fault is
 * reported, each with line, key, what was found and what would be right.
 *
 * @param text     YAML 1.2 (contract section 3)
 * @param fileName for messages
 * @returns the normalised method; its hash is that of the text's UTF-8 bytes
 * @errors  those of `readYaml`, `readSpecies` and `checkReferences`; solvent-unknown, quality-unknown
 */
export function readMethod(text: string, fileName: string): Result<Method, readonly Problem[]> {
  const file = readYaml(text, fileName, methodSchema);
  if (!file.ok) return file;
  const { value } = file.value;
  const problems: Problem[] = [];
  const species = value.species.map((entry, index) => {
    const result = readSpecies(entry, index, value.nucleus, file.value);
    problems.push(...result.problems);
    return result.species;
  });
  const solvent = readSolvent(file.value, problems);
  checkQuality(file.value, problems);
  const method: Method = {
    title: value.title,
    version: String(value.version),
    sha256: sha256(text),
    nucleus: value.nucleus,
    ...(solvent !== undefined ? { solvent } : {}),
    reference: {
      signal: value.reference.signal,
      ...(value.reference.shift !== undefined ? { shiftPpm: value.reference.shift } : {}),
    },
    species,
    ...(value.conversion ? { conversion: defined(value.conversion) } : {}),
    limits: (value.limits ?? []).map(toLimit),
    ...(value.purity
      ? { purity: { of: value.purity.of, ...(value.purity.at_least !== undefined ? { atLeast: value.purity.at_least } : {}) } }
      : {}),
    ...(value.residual_solvents ? { residualSolvents: value.residual_solvents } : {}),
    processing: toProcessing(value.processing),
    acquisition: toAcquisition(value.acquisition),
    kinetics: toKinetics(value.kinetics),
    quality: value.quality ?? {},
    input: toInput(value.input),
  };
  problems.push(...checkReferences(method, file.value));
  if (problems.length > 0) return fail([...problems].sort((a, b) => (a.where?.line ?? 0) - (b.where?.line ?? 0)));
  return ok(method);
}

type File = YamlFile<MethodYaml>;

function readSolvent({ value, at }: File, problems: Problem[]): string | undefined {
  if (value.solvent === undefined) return undefined;
  const name = solventName(value.solvent);
  if (name !== undefined) return name;
  const nearest = nearestSolvent(value.solvent);
  const hint = nearest !== undefined ? `Did you mean "${nearest}"?` : undefined;
  problems.push(
    at(['solvent'], 'solvent-unknown', `found "${value.solvent}"; expected one of ${knownSolvents().join(', ')}`, hint),
  );
  return undefined;
}

function checkQuality({ value, at }: File, problems: Problem[]): void {
  for (const key of Object.keys(value.quality ?? {})) {
    if (Object.hasOwn(qualityDefaults, key)) continue;
    const nearest = nearestWord(key, Object.keys(qualityDefaults));
    const hint =
      nearest !== undefined ? `Did you mean "${nearest}"?` : `Known thresholds: ${Object.keys(qualityDefaults).join(', ')}.`;
    problems.push(at(['quality', key], 'quality-unknown', `unknown threshold "${key}"`, hint));
  }
}

function toLimit({ species, quantity, at_most: atMost, at_least: atLeast }: NonNullable<MethodYaml['limits']>[number]): Limit {
  return {
    species: species ?? '',
    quantity,
    ...(atMost !== undefined ? { atMost } : {}),
    ...(atLeast !== undefined ? { atLeast } : {}),
  };
}

function toProcessing(given: MethodYaml['processing']): Processing {
  const phase = given?.phase;
  return {
    lineBroadeningHz: given?.line_broadening_hz ?? 'matched',
    zeroFilling: given?.zero_filling ?? 2,
    phase: typeof phase === 'object' ? { zeroDeg: phase.zero_deg, firstDeg: phase.first_deg } : (phase ?? 'automatic'),
    baseline: given?.baseline ?? 'automatic',
  };
}

function toAcquisition(given: MethodYaml['acquisition']): Method['acquisition'] {
  const {
    relaxation_delay_s: relaxationDelayS,
    longest_t1_s: longestT1S,
    pulse_angle_deg: pulseAngleDeg,
    interval_min: interval,
  } = given ?? {};
  return defined({ relaxationDelayS, longestT1S, pulseAngleDeg, intervalS: interval !== undefined ? interval * 60 : undefined });
}

function toKinetics(given: MethodYaml['kinetics']): Method['kinetics'] {
  const { models, points_in_a_row: pointsInARow, stalled_after_min: stalled, silent_after_min: silent } = given ?? {};
  return defined({
    models,
    pointsInARow,
    stalledAfterS: stalled !== undefined ? stalled * 60 : undefined,
    silentAfterS: silent !== undefined ? silent * 60 : undefined,
  });
}

function toInput(given: MethodYaml['input']): Method['input'] {
  const {
    carrier_ppm_record: carrierPpmRecord,
    onset_points_record: onsetPointsRecord,
    carrier_ppm: carrierPpm,
    onset_points: onsetPoints,
  } = given ?? {};
  return defined({ carrierPpmRecord, onsetPointsRecord, carrierPpm, onsetPoints });
}

/** Drops keys that hold nothing. */
export function defined<T extends object>(object: T): { [K in keyof T]: Exclude<T[K], undefined> } {
  return Object.fromEntries(Object.entries(object).filter(([, value]) => value !== undefined)) as {
    [K in keyof T]: Exclude<T[K], undefined>;
  };
}
