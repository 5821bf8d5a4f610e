import { carrierKind } from './carrierKind.js';
import type { Molecule } from './molecule.js';
import type { SpinSite } from './spinSites.js';
import type { CouplingKind } from './structure.js';

/** Kind and usual size of the coupling between two sites, or undefined when it never shows. */
export interface SiteCoupling {
  readonly kind: CouplingKind;
  readonly usualHz: number;
}

/**
 * What couples to what, and how much, from the bonds between.
 *
 * @param molecule  plain graph
 * @param a         one site
 * @param b         another site, not equivalent to it
 * @param path      atoms from the atom of a to that of b, both included
 * @returns kind and usual size in Hz
 * @source  common practice (usual ranges of two-, three- and four-bond couplings)
 */
export function siteCoupling(molecule: Molecule, a: SpinSite, b: SpinSite, path: readonly number[]): SiteCoupling | undefined {
  const bonds = path.length - 1 + a.reach + b.reach;
  const throughTriple = path.filter((atom) => carrierKind(molecule, atom) === 'alkyne').length === 2;
  if (bonds > (throughTriple ? 5 : 4)) return undefined;
  if (a.isExchangeable || b.isExchangeable) return bonds <= 3 ? { kind: 'exchanging', usualHz: 5 } : undefined;
  if (a.element === 'H' && b.element === 'H') return protonCoupling(molecule, a, b, path, bonds);
  const isRing = path.every((atom) => molecule.atoms[atom]!.isAromatic || molecule.atoms[atom]!.element === 'F');
  const elements = a.element + b.element;
  // Fluorine and phosphorus spectra are often decoupled from protons, so seen from there nothing is certain.
  const kind = a.element === 'H' ? 'clear' : 'small';
  if (elements.includes('P')) return bonds <= 3 ? { kind: 'small', usualHz: bonds === 2 ? 15 : 8 } : undefined;
  if (bonds >= 4) return isRing ? { kind: 'small', usualHz: 5.4 } : undefined;
  if (elements === 'FF') return { kind: 'small', usualHz: bonds === 2 ? 150 : 15 };
  return { kind, usualHz: bonds === 2 ? 47 : isRing ? 8.8 : 18 };
}

function protonCoupling(
  molecule: Molecule,
  a: SpinSite,
  b: SpinSite,
  path: readonly number[],
  bonds: number,
): SiteCoupling | undefined {
  const kinds = path.map((atom) => carrierKind(molecule, atom));
  if (bonds === 2) return { kind: 'small', usualHz: 1.6 };
  if (bonds >= 4) {
    const carbonsOnly = kinds.every((kind) => kind !== 'hetero' && kind !== 'carbonyl');
    const isUnsaturated = kinds.filter((kind) => kind !== 'sp3').length >= 2;
    return carbonsOnly && isUnsaturated ? { kind: 'long', usualHz: kinds.includes('alkyne') ? 2.6 : 1.6 } : undefined;
  }
  const [left, right] = kinds;
  if (left === 'aromatic' && right === 'aromatic') {
    // Furan, pyrrole, thiophene, azoles: 1 to 5 Hz, often not resolved.
    return ringSize(molecule, path[0]!, path[1]!) === 5 ? { kind: 'small', usualHz: 3 } : { kind: 'clear', usualHz: 7.8 };
  }
  if (left === 'alkene' && right === 'alkene') {
    const bond = molecule.adjacent[path[0]!]!.find(([other]) => other === path[1])?.[1];
    if (bond !== undefined && molecule.bonds[bond]!.order === 1) return { kind: 'clear', usualHz: 10.8 };
    const sides = `${a.key.at(-1)}${b.key.at(-1)}`;
    return { kind: 'clear', usualHz: sides.includes('b') ? 10.5 : 16.5 };
  }
  if (left === 'carbonyl' || right === 'carbonyl')
    return kinds.includes('sp3') ? { kind: 'small', usualHz: 1.8 } : { kind: 'clear', usualHz: 7.8 };
  if (left === 'imine' || right === 'imine') return { kind: 'small', usualHz: 5 };
  return { kind: 'clear', usualHz: kinds.includes('alkene') ? 6.8 : 7.1 };
}

/** Atoms in the smallest ring that holds a bond; 0 when none does. */
function ringSize(molecule: Molecule, a: number, b: number): number {
  const seen = new Set([a]);
  let front = [a];
  for (let size = 2; front.length > 0; size++) {
    const next: number[] = [];
    for (const atom of front) {
      for (const [other] of molecule.adjacent[atom]!) {
        if ((atom === a && other === b) || seen.has(other)) continue;
        if (other === b) return size;
        seen.add(other);
        next.push(other);
      }
    }
    front = next;
  }
  return 0;
}
