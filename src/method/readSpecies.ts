import type { Problem } from '../base/result.js';
import { molarMassOf } from '../pattern/molarMassOf.js';
import { type Listed, parseListed } from '../pattern/parseListed.js';
import { parsePattern } from '../pattern/parsePattern.js';
import type { Pattern } from '../pattern/pattern.js';
import type { MethodSignal, MethodSpecies } from './method.js';
import type { YamlFile } from './readYaml.js';
import type { MethodYaml } from './schema.js';

type SpeciesYaml = MethodYaml['species'][number];
type SignalYaml = SpeciesYaml['signals'][number];
type At = YamlFile<MethodYaml>['at'];

const withinPpmDefault = 0.05;
const noPattern: Pattern = { text: 'm', splittings: [], isBroad: false, isMultiplet: true };

/**
 * Normalises one species of a method file, and finds what is wrong with it.
 *
 * @returns the species (usable only when `problems` is empty) and every fault with its line
 * @errors  signal-shift-missing, signal-nuclei-missing, signal-pattern-missing, signal-twice, those of `parseListed`,
 *          `parsePattern` and `molarMassOf`, molar-mass-differs
 */
export function readSpecies(
  entry: SpeciesYaml,
  index: number,
  nucleus: string,
  { at }: YamlFile<MethodYaml>,
): { species: MethodSpecies; problems: Problem[] } {
  const problems: Problem[] = [];
  const signals = entry.signals.map((signal, place) =>
    readSignal(signal, entry.id, ['species', index, 'signals', place], nucleus, at, problems),
  );
  const mass = readMolarMass(entry, index, at, problems);
  const species: MethodSpecies = {
    id: entry.id,
    name: entry.name ?? entry.id,
    role: entry.role,
    stoichiometry: entry.stoichiometry ?? 1,
    signals,
    ...(entry.smiles !== undefined ? { smiles: entry.smiles } : {}),
    ...mass,
    ...(entry.mass_fraction !== undefined ? { massFraction: entry.mass_fraction } : {}),
    ...(entry.mass_fraction_u !== undefined ? { massFractionU: entry.mass_fraction_u } : {}),
    ...(entry.concentration_mol_per_l !== undefined ? { concentrationMolPerL: entry.concentration_mol_per_l } : {}),
    ...(entry.concentration_mol_per_l_u !== undefined ? { concentrationMolPerLU: entry.concentration_mol_per_l_u } : {}),
  };
  return { species, problems };
}

function readMolarMass(
  entry: SpeciesYaml,
  index: number,
  at: At,
  problems: Problem[],
): { molarMass?: number; molarMassU?: number } {
  const given = entry.molar_mass;
  const u = entry.molar_mass_u;
  const fromFile = { ...(given !== undefined ? { molarMass: given } : {}), ...(u !== undefined ? { molarMassU: u } : {}) };
  if (entry.smiles === undefined) return fromFile;
  const computed = molarMassOf(entry.smiles);
  if (!computed.ok) {
    problems.push(at(['species', index, 'smiles'], computed.problem.code, computed.problem.message, computed.problem.hint));
    return fromFile;
  }
  const { molarMass, molarMassU, formula } = computed.value;
  if (given !== undefined && Math.abs(given - molarMass) > 1e-3 * molarMass) {
    const message = `found ${given} g/mol; the structure ${formula} has ${molarMass.toPrecision(7)} g/mol`;
    problems.push(
      at(
        ['species', index, 'molar_mass'],
        'molar-mass-differs',
        message,
        'Mend the molar mass or the structure; with a structure the molar mass may be left out.',
      ),
    );
  }
  return {
    molarMass: given ?? molarMass,
    ...(u !== undefined ? { molarMassU: u } : molarMassU !== undefined ? { molarMassU } : {}),
  };
}

function readSignal(
  entry: SignalYaml,
  speciesId: string,
  path: readonly (string | number)[],
  nucleus: string,
  at: At,
  problems: Problem[],
): MethodSignal {
  const listed = readListed(entry, path, at, problems);
  const shiftPpm = entry.shift ?? listed?.shiftPpm;
  const nuclei = entry.nuclei ?? entry.protons ?? listed?.nuclei;
  const pattern = readPattern(entry, path, at, problems) ?? listed?.pattern;
  const missing = (key: string, code: string) => {
    if (entry.listed === undefined || listed !== undefined)
      problems.push(
        at(
          [...path],
          code,
          `signal "${entry.id}" has no ${key}; expected it key by key or in listed: "4.12 (q, J = 7.1 Hz, 2H)"`,
        ),
      );
  };
  if (shiftPpm === undefined) missing('shift', 'signal-shift-missing');
  if (nuclei === undefined) missing('nuclei', 'signal-nuclei-missing');
  if (pattern === undefined) missing('pattern', 'signal-pattern-missing');
  checkDoubled(entry, listed, path, at, problems);
  checkNucleus(entry, path, nucleus, at, problems);
  return {
    id: entry.id,
    key: `${speciesId}/${entry.id}`,
    shiftPpm: shiftPpm ?? 0,
    ...(listed?.rangePpm ? { rangePpm: listed.rangePpm } : {}),
    withinPpm: entry.within ?? withinPpmDefault,
    pattern: pattern ?? noPattern,
    nuclei: nuclei ?? 1,
    use: entry.use ?? 'quantify',
    moves: entry.moves ?? false,
    ...(entry.coupled ? { coupled: entry.coupled } : {}),
    ...(entry.cross_couplings_hz ? { crossCouplingsHz: entry.cross_couplings_hz } : {}),
    ...(entry.t1_s !== undefined ? { t1S: entry.t1_s } : {}),
  };
}

function readListed(entry: SignalYaml, path: readonly (string | number)[], at: At, problems: Problem[]): Listed | undefined {
  if (entry.listed === undefined) return undefined;
  const result = parseListed(entry.listed);
  if (result.ok) return result.value;
  problems.push(at([...path, 'listed'], result.problem.code, result.problem.message, result.problem.hint));
  return undefined;
}

function readPattern(entry: SignalYaml, path: readonly (string | number)[], at: At, problems: Problem[]): Pattern | undefined {
  if (entry.pattern === undefined) return undefined;
  const result = parsePattern(entry.pattern, entry.couplings_hz ?? []);
  if (result.ok) return result.value;
  problems.push(at([...path, 'pattern'], result.problem.code, result.problem.message, result.problem.hint));
  return undefined;
}

/** The same fact given twice must agree. */
function checkDoubled(
  entry: SignalYaml,
  listed: Listed | undefined,
  path: readonly (string | number)[],
  at: At,
  problems: Problem[],
): void {
  const twice: readonly [string, unknown, unknown][] = [
    ['shift', entry.shift, listed?.shiftPpm],
    ['nuclei', entry.nuclei, listed?.nuclei ?? entry.protons],
    ['pattern', entry.pattern, listed?.pattern.text],
  ];
  for (const [key, one, other] of twice) {
    if (one === undefined || other === undefined || one === other) continue;
    problems.push(
      at(
        [...path, key],
        'signal-twice',
        `found ${String(one)} here and ${String(other)} in another key of the same signal; expected one of them`,
      ),
    );
  }
}

/** `-62.9 (s, 3F)` in a 1H method is a slip worth stopping at. */
function checkNucleus(entry: SignalYaml, path: readonly (string | number)[], nucleus: string, at: At, problems: Problem[]): void {
  const element = /\d\s*([A-Z][a-z]?)\s*[,)]/.exec(entry.listed ?? '')?.[1];
  const expected = nucleus.replace(/^\d+/, '');
  if (element === undefined || element === expected || !['H', 'F', 'C', 'P', 'N', 'B', 'Si'].includes(element)) return;
  problems.push(at([...path, 'listed'], 'signal-nucleus', `found a count of ${element}; the method's nucleus is ${nucleus}`));
}
