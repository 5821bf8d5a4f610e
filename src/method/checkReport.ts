import type { Flag } from '../base/flag.js';
import type { Problem } from '../base/result.js';
import type { Line } from '../pattern/pattern.js';
import { type PatternPeak, patternPeaks } from '../pattern/patternPeaks.js';
import { printPattern } from '../pattern/printPattern.js';
import { type BackgroundSignal, type Collision, findCollisions, fitInflation } from './collisions.js';
import { type CouplingNetwork, couplingNetwork } from './couplingNetwork.js';
import { couplingRemarks } from './couplingRemarks.js';
import { expectedLines } from './expectedLines.js';
import type { Method, MethodSignal, MethodSpecies, Use } from './method.js';
import { satelliteRemarks } from './satelliteRemarks.js';
import { type StructureMatch, type StructureReport, structureCheck } from './structureCheck.js';

/** What one signal should look like at one field. */
export interface SignalAtField {
  readonly observeMhz: number;
  /** Hz from the signal's shift and shares; empty when the method declares no lines. */
  readonly lines: readonly Line[];
  /** What the eye sees at the report's line width. */
  readonly peaks: readonly PatternPeak[];
  /** Hz between the outermost peaks. */
  readonly spanHz: number;
  /** Factor by which the area's standard uncertainty grows because its neighbours are fitted with it; Infinity: hopeless. */
  readonly uFactor: number;
}

export interface CheckedSignal {
  readonly key: string;
  /** As an experimental section would print it. */
  readonly listed: string;
  readonly use: Use;
  readonly structure?: StructureMatch;
  /** How the pattern is computed: `exact` with its partners, `first-order`, or `undeclared`. */
  readonly basis: 'exact' | 'first-order' | 'undeclared';
  readonly partners: readonly { readonly signal: string; readonly couplingHz: number; readonly origin: 'given' | 'inferred' }[];
  readonly atFields: readonly SignalAtField[];
}

export interface CheckedSpecies {
  readonly id: string;
  readonly name: string;
  readonly role: string;
  readonly smiles?: string;
  readonly formula?: string;
  readonly molarMass?: number;
  readonly signals: readonly CheckedSignal[];
  readonly unlisted: StructureReport['unlisted'];
}

/** The whole answer of `check`. */
export interface CheckReport {
  readonly title: string;
  readonly version: string;
  readonly sha256: string;
  readonly nucleus: string;
  readonly solvent?: string;
  readonly fieldsMhz: readonly number[];
  /** Full width at half height that patterns and collisions are judged at, Hz. */
  readonly widthHz: number;
  readonly species: readonly CheckedSpecies[];
  readonly collisions: readonly Collision[];
  /** Contradictions first, then remarks (weight `note`). */
  readonly flags: readonly Flag[];
  /** Structures that could not be read. */
  readonly problems: readonly Problem[];
}

/**
 * Judges a method without data: structure against listing, the pattern of every signal at each field, and which signals of
 * different species come to lie on each other.
 *
 * @param method     as read
 * @param fieldsMhz  observe frequencies, MHz
 * @param widthHz    full width at half height of a line, Hz
 * @param background residual solvent and water, for collisions
 * @returns everything that the terminal, the JSON and the page print
 * @source  see `structureCheck`, `expectedLines`, `overlapShare`, `areaInflation`
 */
export function checkMethod(
  method: Method,
  fieldsMhz: readonly number[],
  widthHz = 1,
  background: readonly BackgroundSignal[] = [],
): CheckReport {
  const structures = method.species.map((species) => structureCheck(species, method.nucleus));
  const reports = structures.map((result) => (result.ok ? result.value : undefined));
  const contradictions = method.species.flatMap(couplingRemarks);
  const flags = [
    ...contradictions,
    ...reports.flatMap((report) => report?.flags ?? []),
    ...fieldsMhz.flatMap((observeMhz) => satelliteRemarks(method, observeMhz)),
  ];
  const isNote = (flag: Flag) => (flag.weight === 'note' ? 1 : 0);
  const element = method.nucleus.replace(/^\d+/, '');
  const inflation = fieldsMhz.map((observeMhz) => fitInflation(method, observeMhz, widthHz));
  return {
    title: method.title,
    version: method.version,
    sha256: method.sha256,
    nucleus: method.nucleus,
    ...(method.solvent !== undefined ? { solvent: method.solvent } : {}),
    fieldsMhz,
    widthHz,
    species: method.species.map((species, index) =>
      checkSpecies(species, reports[index], { fieldsMhz, widthHz, inflation, element }),
    ),
    collisions: fieldsMhz.flatMap((observeMhz) => findCollisions(method, observeMhz, widthHz, background)),
    flags: flags.sort((a, b) => isNote(a) - isNote(b)),
    problems: structures.flatMap((result) => (result.ok ? [] : [result.problem])),
  };
}

interface CheckSettings {
  readonly fieldsMhz: readonly number[];
  readonly widthHz: number;
  /** One map per field: signal key -> factor. */
  readonly inflation: readonly ReadonlyMap<string, number>[];
  readonly element: string;
}

function checkSpecies(
  species: MethodSpecies,
  report: StructureReport | undefined,
  { fieldsMhz, widthHz, inflation, element }: CheckSettings,
): CheckedSpecies {
  const network = couplingNetwork(species);
  const lines = fieldsMhz.map((observeMhz) => expectedLines(species, observeMhz));
  const molarMass = species.molarMass ?? report?.structure.molarMass;
  return {
    id: species.id,
    name: species.name,
    role: species.role,
    ...(species.smiles !== undefined ? { smiles: species.smiles } : {}),
    ...(report !== undefined && report.structure.formula !== '' ? { formula: report.structure.formula } : {}),
    ...(molarMass !== undefined ? { molarMass } : {}),
    unlisted: report?.unlisted ?? [],
    signals: species.signals.map((signal): CheckedSignal => {
      const match = report?.matches.find(({ key }) => key === signal.key);
      const partners = partnersOf(network, signal.id);
      const isDeclared = (lines[0]?.get(signal.id) ?? []).length > 0;
      return {
        key: signal.key,
        listed: printSignal(signal, element),
        use: signal.use,
        ...(match !== undefined ? { structure: match } : {}),
        basis: !isDeclared ? 'undeclared' : partners.length > 0 ? 'exact' : 'first-order',
        partners,
        atFields: fieldsMhz.map((observeMhz, index) => {
          const own = lines[index]!.get(signal.id) ?? [];
          const peaks = patternPeaks(own, widthHz);
          const spanHz = peaks.length > 0 ? peaks[0]!.offsetHz - peaks.at(-1)!.offsetHz : 0;
          return { observeMhz, lines: own, peaks, spanHz, uFactor: inflation[index]!.get(signal.key) ?? 1 };
        }),
      };
    }),
  };
}

function partnersOf(network: CouplingNetwork, id: string): CheckedSignal['partners'] {
  return network.couplings.flatMap(({ a, b, couplingHz, origin }) =>
    a === id || b === id ? [{ signal: a === id ? b : a, couplingHz, origin }] : [],
  );
}

/** `4.12 (q, J = 7.1 Hz, 2H)`. */
function printSignal(signal: MethodSignal, element: string): string {
  const shift = signal.rangePpm !== undefined ? `${signal.rangePpm[1]}-${signal.rangePpm[0]}` : `${signal.shiftPpm}`;
  return `${shift} (${printPattern(signal.pattern)}, ${signal.nuclei}${element})`;
}
