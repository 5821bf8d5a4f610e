import { createRequire } from 'node:module';
import type { Molecule as LibraryMolecule } from 'openchemlib';
import { fail, ok, type Result } from '../base/result.js';
import type { Molecule, MoleculeAtom, MoleculeBond } from './molecule.js';
import { patternProblem } from './patternProblem.js';

/** Loaded on first use, because it takes longer than everything else a short command does. */
const loadPackage = createRequire(import.meta.url);
let library: typeof import('openchemlib') | undefined;

const smilesLengthMax = 2000;
const atomsMax = 300;
const cache = new Map<string, Result<Molecule>>();
const cacheMax = 500;

/**
 * Reads a SMILES structure into a plain graph.
 *
 * @param smiles  SMILES of one or more components (OpenSMILES)
 * @returns atoms with their attached hydrogens, bonds and neighbours
 * @errors  smiles-unreadable (not SMILES, unknown element, open bracket or ring), smiles-valence (too many bonds on an atom),
 *          smiles-too-large
 * @source  parsing, aromaticity and ring membership by openchemlib (BSD)
 */
export function readMolecule(smiles: string): Result<Molecule> {
  const known = cache.get(smiles);
  if (known !== undefined) return known;
  const read = parse(smiles);
  if (cache.size >= cacheMax) cache.clear();
  cache.set(smiles, read);
  return read;
}

function parse(smiles: string): Result<Molecule> {
  if (smiles.length > smilesLengthMax) return fail(tooLarge(`${smiles.length} characters; at most ${smilesLengthMax}`));
  const slip = firstSlip(smiles);
  if (slip !== undefined) return fail(unreadable(smiles, slip));
  library ??= loadPackage('openchemlib') as typeof import('openchemlib');
  let molecule: LibraryMolecule;
  try {
    molecule = library.Molecule.fromSmiles(smiles, { noCoordinates: true, noStereo: true });
    molecule.ensureHelperArrays(library.Molecule.cHelperRings);
  } catch (cause) {
    return fail({ ...unreadable(smiles, reasonOf(cause)), cause });
  }
  const count = molecule.getAllAtoms();
  if (count === 0) return fail(unreadable(smiles, 'no atoms'));
  if (count > atomsMax) return fail(tooLarge(`${count} atoms; at most ${atomsMax}`));
  for (let index = 0; index < count; index++) {
    const problem = atomProblem(smiles, molecule, index);
    if (problem !== undefined) return fail(problem);
  }
  return ok(toGraph(molecule));
}

/** What the parser lets pass in silence. */
function firstSlip(smiles: string): string | undefined {
  if (smiles.trim() === '' || /\s/.test(smiles)) return 'it is empty or holds a blank';
  if (/[*?]/.test(smiles)) return 'a wild card is not a structure';
  let depth = 0;
  for (const letter of smiles) {
    if (letter === '(') depth++;
    if (letter === ')') depth--;
    if (depth < 0) return 'a ) without its (';
  }
  return depth > 0 ? 'a ( without its )' : undefined;
}

function atomProblem(smiles: string, molecule: LibraryMolecule, index: number) {
  const label = molecule.getAtomLabel(index);
  if (!/^[A-Z][a-z]?$/.test(label)) return unreadable(smiles, `"${label}" is not an element`);
  const bonds = molecule.getOccupiedValence(index);
  const most = molecule.getMaxValence(index);
  // Metals and charged atoms bind as they like; for carbon and its neighbours a bond too many is a slip of the pen.
  if (/^[CNOF]$/.test(label) && molecule.getAtomCharge(index) === 0 && bonds > most && !(label === 'N' && bonds === 5)) {
    return patternProblem(
      'smiles-valence',
      `"${clip(smiles)}": ${label} (atom ${index + 1}) has ${bonds} bonds; at most ${most}`,
    );
  }
  return undefined;
}

function toGraph(molecule: LibraryMolecule): Molecule {
  const all = Array.from({ length: molecule.getAllAtoms() }, (_, index) => index);
  // A hydrogen that the structure writes out ([H]C) is a hydrogen like any other, not an atom of its own.
  const plain = all.filter((index) => isPlainHydrogen(molecule, index));
  const kept = all.filter((index) => !plain.includes(index));
  const place = new Map(kept.map((index, position) => [index, position]));
  const atoms: MoleculeAtom[] = kept.map((index) => ({
    element: molecule.getAtomLabel(index),
    massNumber: molecule.getAtomMass(index),
    charge: molecule.getAtomCharge(index),
    hydrogens: molecule.getImplicitHydrogens(index) + plain.filter((hydrogen) => molecule.getBond(hydrogen, index) >= 0).length,
    isAromatic: molecule.isAromaticAtom(index),
    isInRing: molecule.isRingAtom(index),
  }));
  const bonds = Array.from({ length: molecule.getAllBonds() }, (_, index) => index).flatMap((index): MoleculeBond[] => {
    const a = place.get(molecule.getBondAtom(0, index));
    const b = place.get(molecule.getBondAtom(1, index));
    if (a === undefined || b === undefined) return [];
    return [{ atoms: [a, b], order: molecule.getBondOrder(index), isAromatic: molecule.isAromaticBond(index) }];
  });
  const adjacent = atoms.map((): (readonly [number, number])[] => []);
  for (const [index, { atoms: ends }] of bonds.entries()) {
    adjacent[ends[0]]!.push([ends[1], index]);
    adjacent[ends[1]]!.push([ends[0], index]);
  }
  return { atoms, bonds, adjacent };
}

function isPlainHydrogen(molecule: LibraryMolecule, index: number): boolean {
  if (molecule.getAtomLabel(index) !== 'H' || molecule.getAtomMass(index) !== 0 || molecule.getAllConnAtoms(index) !== 1)
    return false;
  return molecule.getAtomLabel(molecule.getConnAtom(index, 0)) !== 'H';
}

function reasonOf(cause: unknown): string {
  const message = cause instanceof Error ? cause.message : String(cause);
  return message.replace(/^.*SmilesParser:\s*/, '').slice(0, 120);
}

function clip(smiles: string): string {
  return smiles.length > 60 ? `${smiles.slice(0, 60)}...` : smiles;
}

function unreadable(smiles: string, reason: string) {
  return patternProblem('smiles-unreadable', `"${clip(smiles)}" is not a SMILES structure: ${reason}`);
}

function tooLarge(what: string) {
  return patternProblem('smiles-too-large', `the structure has ${what} are read`);
}
