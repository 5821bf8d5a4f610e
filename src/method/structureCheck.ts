import type { Flag } from '../base/flag.js';
import { ok, type Result } from '../base/result.js';
import { expectedPattern, expectedSplittings } from '../pattern/expectedPattern.js';
import { neighboursImplied } from '../pattern/neighboursImplied.js';
import { countWords, patternWords } from '../pattern/patternWords.js';
import { readStructure } from '../pattern/readStructure.js';
import type { Structure, StructureGroup } from '../pattern/structure.js';
import { matchSignals, type SignalMatch } from './matchSignals.js';
import type { MethodSignal, MethodSpecies } from './method.js';

/** g/mol by which a stated molar mass may differ from the structure's (rounding to 0.01 and other tables of weights). */
const massTolerance = 0.05;

/** What the structure expects of one listed signal. */
export interface StructureMatch {
  /** `<species>/<signal>` */
  readonly key: string;
  /** Groups that the signal is taken for, as chemists name them; empty when none could be it. */
  readonly labels: readonly string[];
  /** Pattern by the n + 1 rule, of a single group. */
  readonly expected?: string;
  readonly expectedNeighbours?: number;
  /** What the listed pattern implies. */
  readonly listedNeighbours?: number;
  readonly agrees: boolean;
}

/** A species beside its structure. */
export interface StructureReport {
  readonly structure: Structure;
  readonly matches: readonly StructureMatch[];
  /** Groups that no signal of the method lists. */
  readonly unlisted: readonly { readonly label: string; readonly nuclei: number; readonly expected: string }[];
  /** `structure-pattern`, `structure-count`, `structure-mass` contradict; `structure-note` only remarks (weight `note`). */
  readonly flags: readonly Flag[];
}

/**
 * Compares counts, patterns and molar mass of a species with its structure, and explains each disagreement.
 *
 * @param species  with `smiles`
 * @param nucleus  of the method, e.g. `1H`, `19F`
 * @returns matches and flags; undefined when the species has no structure or the nucleus none here (other than 1H, 19F, 31P)
 * @errors  those of `readMolecule`
 * @source  n + 1 rule (common practice)
 */
export function structureCheck(species: MethodSpecies, nucleus: string): Result<StructureReport | undefined> {
  const element = /^(?:1H|19F|31P)$/.exec(nucleus)?.[0].replace(/\d/g, '');
  if (species.smiles === undefined || element === undefined) return ok(undefined);
  const read = readStructure(species.smiles, element);
  if (!read.ok) return read;
  const structure = read.value;
  const found = matchSignals(species.signals, structure);
  const used = new Set(found.flatMap(({ groups }) => groups));
  return ok({
    structure,
    matches: found.map((match) => describe(match, structure)),
    unlisted: structure.groups.flatMap((group, index) =>
      used.has(index) ? [] : [{ label: group.label, nuclei: group.nuclei, expected: expectedPattern(group) }],
    ),
    flags: [...massFlags(species, structure), ...found.flatMap((match) => flagsOf(match, structure, used))],
  });
}

function describe(match: SignalMatch, structure: Structure): StructureMatch {
  const groups = match.groups.map((index) => structure.groups[index]!);
  const only = groups.length === 1 ? groups[0]! : undefined;
  const listedNeighbours = neighboursImplied(match.signal.pattern);
  return {
    key: match.signal.key,
    labels: groups.map(({ label }) => label),
    ...(only !== undefined ? { expected: expectedPattern(only), expectedNeighbours: neighbourCount(only) } : {}),
    ...(listedNeighbours !== undefined ? { listedNeighbours } : {}),
    agrees: match.fit.fits,
  };
}

function neighbourCount(group: StructureGroup): number {
  return expectedSplittings(group).reduce((sum, { neighbours }) => sum + neighbours, 0);
}

function flagsOf(match: SignalMatch, structure: Structure, used: ReadonlySet<number>): Flag[] {
  const { signal, groups, fit } = match;
  const group = structure.groups[groups[0] ?? -1];
  if (group === undefined) return [countFlag(signal, structure, used)];
  if (!fit.fits) return [patternFlag(signal, group, structure.smiles)];
  if (fit.condition === undefined) return [];
  const reasons = {
    exchanging: `shows ${patternWords(signal.pattern.text)} only when the exchangeable protons beside it couple`,
    uneven: 'lies beside a stereocentre or in a ring, so its pattern need not follow the n + 1 rule',
    unresolved: `should show ${patternWords(expectedPattern(group))} unless its lines are too broad`,
  };
  const message = `the ${group.label} of ${structure.smiles} ${reasons[fit.condition]}`;
  return [{ code: 'structure-note', message, signal: signal.key, weight: 'note' }];
}

function patternFlag(signal: MethodSignal, group: StructureGroup, smiles: string): Flag {
  const count = neighbourCount(group);
  const expected = patternWords(expectedPattern(group));
  const protons = group.isExchangeable ? 'exchanges, so no neighbour splits it' : `has ${countWords(count, 'neighbour')}`;
  const message = `the ${group.label} of ${smiles} ${protons}: ${expected} is expected, the method lists ${patternWords(signal.pattern.text)}`;
  return { code: 'structure-pattern', message, signal: signal.key };
}

function countFlag(signal: MethodSignal, structure: Structure, used: ReadonlySet<number>): Flag {
  const free = structure.groups.map((group, index) => ({ group, isFree: !used.has(index) }));
  const apart = (group: StructureGroup) => Math.abs((group.estimatedShiftPpm ?? signal.shiftPpm) - signal.shiftPpm);
  const nearest = free.filter(({ isFree }) => isFree).sort((a, b) => apart(a.group) - apart(b.group))[0]?.group;
  const listed = `the method lists ${signal.nuclei}`;
  const message =
    structure.groups.length === 0
      ? `${structure.smiles} has no ${structure.element} to observe; ${listed}`
      : nearest === undefined
        ? `every group of ${structure.smiles} is listed already; nothing is left for ${signal.nuclei} more`
        : `the ${nearest.label} of ${structure.smiles} has ${nearest.nuclei} nuclei; ${listed}`;
  return { code: 'structure-count', message, signal: signal.key };
}

function massFlags(species: MethodSpecies, structure: Structure): Flag[] {
  if (species.molarMass === undefined || structure.molarMass === undefined) return [];
  if (Math.abs(species.molarMass - structure.molarMass) <= massTolerance) return [];
  const expected = Math.round(structure.molarMass * 1000) / 1000;
  const message = `${structure.smiles} (${structure.formula}) has a molar mass of ${expected} g/mol; the method gives ${species.molarMass}`;
  return [{ code: 'structure-mass', message }];
}
