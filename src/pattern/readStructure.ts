import { ok, type Result } from '../base/result.js';
import { carrierKind } from './carrierKind.js';
import { diastereotopicAtoms } from './diastereotopicAtoms.js';
import { estimateShift } from './estimateShift.js';
import { inequivalentSides } from './inequivalentSides.js';
import { molarMassOf } from './molarMassOf.js';
import type { Molecule } from './molecule.js';
import { readMolecule } from './readMolecule.js';
import { siteCoupling } from './siteCoupling.js';
import { type SpinSite, spinSites } from './spinSites.js';
import type { Neighbour, Structure, StructureGroup } from './structure.js';
import { symmetryClasses } from './symmetryClasses.js';

/** Atoms from one nucleus' atom to another's within five bonds, the furthest that show. */
const stepsMax = 3;

/**
 * Reads a structure into groups of equivalent nuclei with their neighbours, the ground of the n + 1 rule.
 *
 * @param smiles   SMILES
 * @param element  the observed element: `H` (default), `F` or `P`
 * @returns groups in the order of their first atom: labels, counts, neighbours within three (small and long: four) bonds
 * @errors  those of `readMolecule`
 * @source  equivalence by symmetry, cis/trans sides and the replacement test; n + 1 rule (common practice)
 */
export function readStructure(smiles: string, element = 'H'): Result<Structure> {
  const read = readMolecule(smiles);
  if (!read.ok) return read;
  const molecule = read.value;
  const mass = molarMassOf(smiles);
  const plain = symmetryClasses(molecule);
  const sides = inequivalentSides(molecule);
  const sites = spinSites(molecule, sides, plain);
  const observed = sites.filter((site) => site.element === element);
  const keys = [...new Set(observed.map(({ key }) => key))];
  const twins = [...new Set(observed.flatMap(({ twin }) => twin ?? []))];
  const uneven = diastereotopicAtoms(molecule, plain);
  const groups = keys.map((key): StructureGroup => {
    const own = observed.filter((site) => site.key === key);
    const first = own[0]!;
    return {
      label: first.label,
      atoms: own.map(({ atom }) => atom),
      nuclei: own.reduce((sum, site) => sum + site.count, 0),
      isExchangeable: first.isExchangeable,
      isAromatic: molecule.atoms[first.atom]!.isAromatic,
      isDiastereotopic: element === 'H' && uneven.has(first.atom),
      isInSaturatedRing: molecule.atoms[first.atom]!.isInRing && carrierKind(molecule, first.atom) === 'sp3',
      ...(first.twin !== undefined ? { twin: twins.indexOf(first.twin) } : {}),
      ...(element === 'H' ? { estimatedShiftPpm: estimateShift(molecule, first.atom) } : {}),
      neighbours: neighboursOf(molecule, sites, first, keys, element),
    };
  });
  return ok({
    smiles,
    formula: mass.ok ? mass.value.formula : '',
    ...(mass.ok ? { molarMass: mass.value.molarMass } : {}),
    element,
    groups,
  });
}

function neighboursOf(
  molecule: Molecule,
  sites: readonly SpinSite[],
  own: SpinSite,
  keys: readonly string[],
  element: string,
): Neighbour[] {
  const paths = pathsFrom(molecule, own.atom);
  const found = new Map<string, Neighbour>();
  for (const site of sites) {
    const path = paths.get(site.atom);
    // Equivalent nuclei do not split each other.
    if (path === undefined || site.key === own.key) continue;
    const coupling = siteCoupling(molecule, own, site, path);
    if (coupling === undefined) continue;
    const id = `${site.key} ${coupling.kind}`;
    const before = found.get(id)?.count ?? 0;
    found.set(id, {
      element: site.element,
      ...(site.element === element ? { group: keys.indexOf(site.key) } : {}),
      label: site.label,
      count: before + site.count,
      ...coupling,
    });
  }
  return [...found.values()].sort((a, b) => b.usualHz - a.usualHz);
}

/** Shortest path to every atom within reach. */
function pathsFrom(molecule: Molecule, start: number): Map<number, number[]> {
  const paths = new Map<number, number[]>([[start, [start]]]);
  let front = [start];
  for (let step = 0; step < stepsMax; step++) {
    const next: number[] = [];
    for (const atom of front) {
      for (const [other] of molecule.adjacent[atom]!) {
        if (paths.has(other)) continue;
        paths.set(other, [...paths.get(atom)!, other]);
        next.push(other);
      }
    }
    front = next;
  }
  return paths;
}
