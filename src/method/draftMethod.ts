import { fail, ok, type Result } from '../base/result.js';
import { expectedSplittings } from '../pattern/expectedPattern.js';
import type { Listed } from '../pattern/parseListed.js';
import { printHertz, printPattern } from '../pattern/printPattern.js';
import { readStructure } from '../pattern/readStructure.js';
import { letterFor } from '../pattern/splittingLetters.js';
import type { Structure, StructureGroup } from '../pattern/structure.js';
import { matchSignals } from './matchSignals.js';
import type { MethodSignal, Role, Use } from './method.js';
import { uniqueIds } from './uniqueIds.js';

/** One proposed signal: ready to print. */
export interface DraftSignal {
  readonly id: string;
  /** `4.12 (q, J = 7.1 Hz, 2H)` */
  readonly listed: string;
  readonly use: Use;
  readonly withinPpm?: number;
  readonly moves: boolean;
  /** What was guessed, or what a chemist should look at. */
  readonly comment?: string;
}

export interface DraftSpecies {
  readonly id: string;
  readonly name: string;
  readonly role: Role;
  readonly smiles?: string;
  readonly comment?: string;
  readonly signals: readonly DraftSignal[];
}

/** What is known of one compound. */
export interface DraftSource {
  readonly name: string;
  readonly smiles?: string;
  readonly listed?: readonly Listed[];
}

/** Estimated shifts are searched this far on either side until a chemist puts the true ones. */
const guessWithinPpm = 0.6;
const phenylRangePpm = 0.2;

/**
 * Proposes the species of a method: listed signals as they stand, named after the structure when there is one; from a structure
 * alone, signals at estimated shifts with usual couplings, each marked as a guess.
 *
 * @param sources  in the order starting material, product, then by-products
 * @param nucleus  `1H` or another
 * @returns species that `readMethod` accepts
 * @errors  draft-nothing-to-list (a structure alone, for a nucleus whose shifts are not estimated), those of `readStructure`
 */
export function draftSpecies(sources: readonly DraftSource[], nucleus: string): Result<readonly DraftSpecies[]> {
  const ids = uniqueIds(sources.map(({ name }, index) => name || (sources.length === 1 ? 'compound' : `compound-${index + 1}`)));
  const species: DraftSpecies[] = [];
  for (const [index, source] of sources.entries()) {
    const role: Role = index === 0 ? 'starting-material' : index === 1 ? 'product' : 'by-product';
    const signals = signalsOf(source, nucleus);
    if (!signals.ok) return signals;
    const { name, smiles } = source;
    species.push({
      id: ids[index]!,
      name: name || ids[index]!,
      role,
      ...(smiles !== undefined ? { smiles } : {}),
      comment: 'guess: role by order',
      signals: signals.value,
    });
  }
  return ok(species);
}

function signalsOf({ smiles, listed, name }: DraftSource, nucleus: string): Result<readonly DraftSignal[]> {
  const element = nucleus.replace(/^\d+/, '');
  const structure = smiles === undefined ? undefined : readStructure(smiles, element);
  if (structure !== undefined && !structure.ok) return structure;
  if (listed !== undefined) return ok(fromListed(listed, element, structure?.value));
  if (structure === undefined || element !== 'H' || structure.value.groups.length === 0) {
    const message = `${name || smiles}: without listed signals only 1H signals of a structure with hydrogens can be proposed`;
    return fail({
      code: 'draft-nothing-to-list',
      area: 'method',
      message,
      hint: 'Give the listed signals with --listed.',
      retry: 'never',
    });
  }
  return ok(fromStructure(structure.value));
}

function fromListed(listed: readonly Listed[], element: string, structure: Structure | undefined): DraftSignal[] {
  const bare = listed.map(
    (entry, index): MethodSignal => ({
      id: `s${index}`,
      key: `s${index}`,
      shiftPpm: entry.shiftPpm,
      ...(entry.rangePpm !== undefined ? { rangePpm: entry.rangePpm } : {}),
      withinPpm: 0.05,
      pattern: entry.pattern,
      nuclei: entry.nuclei,
      use: 'quantify',
      moves: false,
    }),
  );
  const matches = structure === undefined ? undefined : matchSignals(bare, structure);
  const groups = bare.map((_, index) => (matches?.[index]?.groups ?? []).map((place) => structure!.groups[place]!));
  const names = listed.map(
    (entry, index) => groups[index]![0]?.label ?? entry.assignment ?? `at-${shiftText(entry).replace('.', '-')}`,
  );
  const ids = uniqueIds(names);
  return listed.map((entry, index) => {
    const isOpen = entry.pattern.isMultiplet;
    const exchanges = groups[index]!.some(({ isExchangeable }) => isExchangeable) || /^(?:br )/.test(entry.pattern.text);
    const isAgainst = matches !== undefined && !matches[index]!.fit.fits;
    const comment = isAgainst
      ? 'look: the structure does not lead to this'
      : exchanges
        ? 'guess: exchanges, so it is not measured'
        : undefined;
    return {
      id: ids[index]!,
      listed: `${shiftText(entry)} (${printPattern(entry.pattern)}, ${entry.nuclei}${element})`,
      use: isOpen || exchanges ? 'ignore' : 'quantify',
      moves: false,
      ...(comment !== undefined ? { comment } : {}),
    };
  });
}

function shiftText({ shiftPpm, rangePpm }: Listed): string {
  return rangePpm === undefined ? String(shiftPpm) : `${rangePpm[1]}-${rangePpm[0]}`;
}

function fromStructure(structure: Structure): DraftSignal[] {
  const { groups } = structure;
  const ring = groups.filter((group) => group.isAromatic && expectedSplittings(group).length > 0);
  // The protons of a mono- or polysubstituted ring overlap; only a para pair of doublets is listed apart.
  const isPair = ring.length === 2 && ring.every((group) => group.nuclei === 2);
  const single = groups.filter((group) => isPair || !ring.includes(group));
  const ids = uniqueIds([...single.map(({ label }) => label), ...(isPair || ring.length === 0 ? [] : ['Ar'])]);
  const signals = single.map((group, index) => guessSignal(group, ids[index]!));
  if (!isPair && ring.length > 0) signals.push(guessRing(ring, ids.at(-1)!));
  return signals.sort((a, b) => Number.parseFloat(b.listed) - Number.parseFloat(a.listed));
}

function guessSignal(group: StructureGroup, id: string): DraftSignal {
  const splittings = expectedSplittings(group);
  const letters = splittings.map(({ neighbours }) => letterFor(neighbours));
  const isOpen = group.isDiastereotopic || group.isInSaturatedRing || letters.length > 4 || letters.includes(undefined);
  const isPlain = splittings.length === 0;
  const couplings = splittings.map(({ usualHz }) => printHertz(usualHz)).join(', ');
  const pattern = group.isExchangeable ? 'br s' : isPlain ? 's' : isOpen ? 'm' : `${letters.join('')}, J = ${couplings} Hz`;
  const isMultiplet = pattern === 'm';
  const what = group.isExchangeable
    ? 'exchanges, so it is not measured'
    : isMultiplet
      ? 'no n + 1 pattern here'
      : 'usual couplings';
  return {
    id,
    listed: `${group.estimatedShiftPpm ?? 0} (${pattern}, ${group.nuclei}H)`,
    use: group.isExchangeable || isMultiplet ? 'ignore' : 'quantify',
    withinPpm: guessWithinPpm,
    moves: false,
    comment: `guess: shift estimated from the structure, ${isPlain && !group.isExchangeable ? 'no coupling' : what}`,
  };
}

function guessRing(ring: readonly StructureGroup[], id: string): DraftSignal {
  const shifts = ring.map(({ estimatedShiftPpm }) => estimatedShiftPpm ?? 7.3);
  const high = Math.round((Math.max(...shifts) + phenylRangePpm / 2) * 100) / 100;
  const low = Math.round((Math.min(...shifts) - phenylRangePpm / 2) * 100) / 100;
  const nuclei = ring.reduce((sum, group) => sum + group.nuclei, 0);
  return {
    id,
    listed: `${high}-${low} (m, ${nuclei}H)`,
    use: 'ignore',
    moves: false,
    comment: 'guess: range estimated from the structure',
  };
}
