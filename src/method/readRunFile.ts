import { ok, type Problem, type Result } from '../base/result.js';
import type { RunFile } from './method.js';
import { defined } from './readMethod.js';
import { readYaml } from './readYaml.js';
import { runSchema } from './schema.js';

/**
 * Reads `run.yaml`, the optional facts about one batch (contract section 4).
 *
 * @errors those of `readYaml`; a negative or zero mass is one of them
 */
export function readRunFile(text: string, fileName: string): Result<RunFile, readonly Problem[]> {
  const file = readYaml(text, fileName, runSchema);
  if (!file.ok) return file;
  const { value } = file.value;
  return ok(
    defined({
      batch: value.batch,
      started: value.started !== undefined ? new Date(value.started).toISOString().replace('.000Z', 'Z') : undefined,
      sampleMassMg: value.sample_mass_mg,
      sampleMassUMg: value.sample_mass_u_mg,
      standardMassMg: value.standard_mass_mg,
      standardMassUMg: value.standard_mass_u_mg,
      standardMassFraction: value.standard_mass_fraction,
      standardMassFractionU: value.standard_mass_fraction_u,
      notes: value.notes,
      method: value.method,
      final: value.final,
    }),
  );
}
