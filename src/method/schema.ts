import { z } from 'zod';

/**
 * The one source of the file formats: zod schemas from which both the checks and the published JSON Schemas come.
 * Keys are those of the files; normalised types stand in `method.ts`.
 */
const id = z.string().regex(/^[A-Za-z0-9-]{1,64}$/, 'letters, digits and dashes, at most 64');
const ppm = z.number().min(-2000).max(2000);
const hertz = z.number().min(-1000).max(1000);
const positive = z.number().positive();
const share = z.number().min(0).max(1);
const text = z.string().min(1).max(2000);

export const roles = [
  'starting-material',
  'reagent',
  'catalyst',
  'intermediate',
  'product',
  'by-product',
  'impurity',
  'solvent',
  'internal-standard',
] as const;

export const lawNames = [
  'zero-order',
  'first-order',
  'second-order',
  'second-order-unequal',
  'reversible',
  'consecutive',
  'autocatalytic',
  'induction',
] as const;

const signalSchema = z.strictObject({
  id,
  listed: text.describe('as in an experimental section: "4.12 (q, J = 7.1 Hz, 2H)"').optional(),
  shift: ppm.optional(),
  within: positive.max(50).describe('ppm searched on either side, default 0.05').optional(),
  pattern: z.string().max(40).optional(),
  couplings_hz: z.array(hertz).max(8).optional(),
  nuclei: z.int().min(1).max(1000).optional(),
  protons: z.int().min(1).max(1000).describe('synonym of nuclei').optional(),
  use: z.enum(['quantify', 'confirm', 'ignore']).optional(),
  moves: z.boolean().optional(),
  coupled: z.record(z.string(), hertz).optional(),
  cross_couplings_hz: z.array(hertz).max(6).optional(),
  t1_s: positive.max(1000).optional(),
});

const speciesSchema = z.strictObject({
  id,
  name: text.optional(),
  role: z.enum(roles),
  smiles: z.string().min(1).max(2000).optional(),
  molar_mass: positive.max(100_000).optional(),
  molar_mass_u: positive.optional(),
  stoichiometry: positive.max(100).optional(),
  mass_fraction: share.optional(),
  mass_fraction_u: positive.max(1).optional(),
  concentration_mol_per_l: positive.max(100).optional(),
  concentration_mol_per_l_u: positive.max(100).optional(),
  signals: z.array(signalSchema).min(1).max(200),
});

const phase = z.union([z.enum(['automatic', 'none']), z.strictObject({ zero_deg: z.number(), first_deg: z.number() })]);

export const methodSchema = z.strictObject({
  kinetrail: z.literal('method/1'),
  title: text,
  version: z.union([z.string().min(1).max(100), z.number()]).describe('text; quote numbers'),
  nucleus: z.string().regex(/^\d{1,3}[A-Z][a-z]?$/, 'mass number and element, such as 1H or 19F'),
  solvent: text.optional(),
  reference: z.strictObject({ signal: text, shift: ppm.optional() }),
  species: z.array(speciesSchema).min(1).max(100),
  conversion: z.strictObject({ of: id, to: id.optional(), target: share.optional() }).optional(),
  limits: z
    .array(
      z.strictObject({
        species: id.optional(),
        quantity: z.enum(['mole-fraction', 'mass-fraction', 'conversion', 'unassigned']),
        at_most: share.optional(),
        at_least: share.optional(),
      }),
    )
    .max(100)
    .optional(),
  purity: z.strictObject({ of: id, at_least: share.optional() }).optional(),
  residual_solvents: z.strictObject({ limits: z.literal('ich-q3c'), of: id }).optional(),
  processing: z
    .strictObject({
      line_broadening_hz: z.union([z.number().min(0).max(1000), z.literal('matched')]).optional(),
      zero_filling: z.number().min(1).max(8).optional(),
      phase: phase.optional(),
      baseline: z.enum(['automatic', 'none']).optional(),
    })
    .optional(),
  acquisition: z
    .strictObject({
      relaxation_delay_s: positive.max(10_000).optional(),
      longest_t1_s: positive.max(1000).optional(),
      pulse_angle_deg: positive.max(180).optional(),
      interval_min: positive.max(100_000).optional(),
    })
    .optional(),
  kinetics: z
    .strictObject({
      models: z.array(z.enum(lawNames)).min(1).optional(),
      points_in_a_row: z.int().min(1).max(100).optional(),
      stalled_after_min: positive.optional(),
      silent_after_min: positive.optional(),
    })
    .optional(),
  quality: z.record(z.string(), z.number()).optional(),
  input: z
    .strictObject({
      carrier_ppm_record: text.optional(),
      onset_points_record: text.optional(),
      carrier_ppm: ppm.optional(),
      onset_points: z.number().min(0).max(1000).optional(),
    })
    .optional(),
});

const utcTime = z
  .string()
  .regex(
    /^\d{4}-\d{2}-\d{2}T\d{2}:\d{2}(:\d{2}(\.\d+)?)?(Z|[+-]\d{2}:?\d{2})$/,
    'ISO 8601 with a zone, such as 2026-03-14T19:30:00Z',
  );

export const runSchema = z.strictObject({
  kinetrail: z.literal('run/1'),
  batch: text.optional(),
  started: utcTime.optional(),
  sample_mass_mg: positive.optional(),
  sample_mass_u_mg: positive.optional(),
  standard_mass_mg: positive.optional(),
  standard_mass_u_mg: positive.optional(),
  standard_mass_fraction: share.optional(),
  standard_mass_fraction_u: positive.max(1).optional(),
  notes: z.string().max(20_000).optional(),
  method: text.optional(),
  final: z.boolean().optional(),
});

const events = [
  'target-reached',
  'stalled',
  'limit-broken',
  'new-signal',
  'balance-lost',
  'silent',
  'trouble',
  'final-report',
] as const;
const mail = z.strictObject({
  to: z.array(text).min(1).max(50),
  server: text,
  from: text.optional(),
  user: text.optional(),
  password_env: text.describe('name of the environment variable that holds the password').optional(),
  attach_report: z.boolean().optional(),
});

export const siteSchema = z.strictObject({
  kinetrail: z.literal('site/1'),
  runs: z
    .array(z.strictObject({ match: text, method: text }))
    .max(1000)
    .optional(),
  settle_s: z.number().min(0).max(86_400).optional(),
  poll_s: positive.max(86_400).optional(),
  workers: z.int().min(1).max(64).optional(),
  silent_after_min: positive.optional(),
  tell: z
    .array(
      z.strictObject({
        on: z.array(z.enum(events)).min(1),
        webhook: text.optional(),
        token_env: text.describe('name of the environment variable that holds a bearer token').optional(),
        mail: mail.optional(),
        file: text.optional(),
      }),
    )
    .max(100)
    .optional(),
  input: z.strictObject({ carrier_ppm_record: text.optional(), onset_points_record: text.optional() }).optional(),
});

export type MethodYaml = z.infer<typeof methodSchema>;
export type RunYaml = z.infer<typeof runSchema>;
export type SiteYaml = z.infer<typeof siteSchema>;

/** The published JSON Schemas (draft 2020-12), from the same source as the checks. */
export function jsonSchemas(): Record<'method' | 'run' | 'site', object> {
  return { method: z.toJSONSchema(methodSchema), run: z.toJSONSchema(runSchema), site: z.toJSONSchema(siteSchema) };
}
