import { carrierKind } from './carrierKind.js';
import { isCarbonyl } from './inequivalentSides.js';
import type { Molecule } from './molecule.js';

/** ppm that a substituent on the carbon itself adds to a proton on sp3 carbon (common practice, after Shoolery's rule). */
const alphaPpm: Readonly<Record<string, number>> = {
  O: 2.1,
  ester: 2.75,
  N: 1.4,
  amide: 1.8,
  S: 1.3,
  F: 3.2,
  Cl: 2.2,
  Br: 2.1,
  I: 1.9,
  P: 0.9,
  Si: -0.9,
  B: -0.2,
};
const nextToPpm = { carbonyl: 1.15, aromatic: 1.45, alkene: 0.8, alkyne: 0.95, imine: 1.0 } as const;
const nitrilePpm = 1.2;
const betaPpm = 0.35;
const basePpm: readonly number[] = [0, 1.5, 1.25, 0.9];

/**
 * A coarse proton shift from the nearest substituents: good enough to tell which listed signal is which group, and for a
 * proposal that a chemist then corrects. It measures nothing.
 *
 * @param molecule  plain graph
 * @param atom      the atom that carries the proton
 * @returns ppm, within about 0.6 ppm for most groups
 * @source  additive increments in the manner of J. N. Shoolery (common practice, rounded)
 */
export function estimateShift(molecule: Molecule, atom: number): number {
  const around = molecule.adjacent[atom]!.map(([other]) => other);
  const { element, hydrogens } = molecule.atoms[atom]!;
  switch (carrierKind(molecule, atom)) {
    case 'hetero':
      if (element === 'O')
        return around.some((other) => isCarbonyl(molecule, other))
          ? 11
          : around.some((other) => molecule.atoms[other]!.isAromatic)
            ? 5.5
            : 2.2;
      return element === 'N' ? (around.some((other) => isCarbonyl(molecule, other)) ? 6 : 1.8) : 1.5;
    case 'aromatic':
      return aromaticShift(molecule, atom);
    case 'alkene':
      return alkeneShift(molecule, atom);
    case 'alkyne':
      return 2.4;
    case 'imine':
      return 8.2;
    case 'carbonyl':
      return around.some((other) => molecule.atoms[other]!.element === 'O' && molecule.adjacent[other]!.length > 1) ? 8.05 : 9.8;
    case 'sp3': {
      const alpha = around.reduce((sum, other) => sum + substituent(molecule, other, atom), 0);
      const polar = around.filter((other) => molecule.atoms[other]!.element === 'C' && isPolar(molecule, other, atom)).length;
      return round((basePpm[hydrogens] ?? 0.9) + alpha + betaPpm * polar);
    }
  }
}

function substituent(molecule: Molecule, atom: number, from: number): number {
  const { element } = molecule.atoms[atom]!;
  if (element !== 'C') {
    const isAcyl = molecule.adjacent[atom]!.some(
      ([other]) => other !== from && (isCarbonyl(molecule, other) || molecule.atoms[other]!.isAromatic),
    );
    const key = isAcyl && element === 'O' ? 'ester' : isAcyl && element === 'N' ? 'amide' : element;
    return alphaPpm[key] ?? 0.5;
  }
  const kind = carrierKind(molecule, atom);
  if (kind === 'alkyne' && molecule.adjacent[atom]!.some(([other]) => molecule.atoms[other]!.element === 'N')) return nitrilePpm;
  return kind === 'sp3' || kind === 'hetero' ? 0 : nextToPpm[kind];
}

/** A carbon whose own substituents draw: a hetero atom on it, or a carbonyl or aryl group beyond it. */
function isPolar(molecule: Molecule, atom: number, from: number): boolean {
  if (carrierKind(molecule, atom) !== 'sp3') return false;
  return molecule.adjacent[atom]!.some(
    ([other]) =>
      other !== from &&
      (!/^(?:C|H|Si)$/.test(molecule.atoms[other]!.element) || isCarbonyl(molecule, other) || molecule.atoms[other]!.isAromatic),
  );
}

/** What ring positions one, two and three bonds away add (ortho, meta, para; common practice). */
function aromaticShift(molecule: Molecule, atom: number): number {
  let shift = 7.27;
  const ring = (at: number, seen: ReadonlySet<number>) =>
    molecule.adjacent[at]!.map(([other]) => other).filter((other) => molecule.atoms[other]!.isAromatic && !seen.has(other));
  let front = [atom];
  const seen = new Set(front);
  for (const step of [0, 1, 2]) {
    front = [...new Set(front.flatMap((at) => ring(at, seen)))];
    for (const at of front) seen.add(at);
    for (const at of front) {
      if (molecule.atoms[at]!.element === 'N') shift += [1.2, -0.1, 0.3][step]!;
      for (const [other] of molecule.adjacent[at]!)
        if (!molecule.atoms[other]!.isAromatic) shift += ringEffect(molecule, other, at)[step]!;
    }
  }
  return round(shift);
}

function ringEffect(molecule: Molecule, atom: number, from: number): readonly [number, number, number] {
  const { element, charge } = molecule.atoms[atom]!;
  if (element === 'N' && charge > 0) return [0.95, 0.25, 0.4];
  if (element === 'O' || element === 'N') {
    const isAcyl = molecule.adjacent[atom]!.some(([other]) => other !== from && isCarbonyl(molecule, other));
    return isAcyl ? [-0.2, 0.05, -0.15] : [-0.45, -0.05, -0.4];
  }
  if (isCarbonyl(molecule, atom)) return [0.7, 0.15, 0.25];
  if (element === 'C' && carrierKind(molecule, atom) === 'alkyne') return [0.3, 0.1, 0.2];
  if (element === 'F') return [-0.25, 0, -0.2];
  return [-0.05, -0.05, -0.1];
}

function alkeneShift(molecule: Molecule, atom: number): number {
  const partner = molecule.adjacent[atom]!.find(([, bond]) => molecule.bonds[bond]!.order === 2)?.[0];
  let shift = 5.25;
  const effects = (at: number, except: number | undefined, oxygen: number, carbonyl: number, aryl: number) => {
    for (const [other] of molecule.adjacent[at]!) {
      if (other === except || other === partner || other === atom) continue;
      if (molecule.atoms[other]!.element === 'O') shift += oxygen;
      else if (isCarbonyl(molecule, other)) shift += carbonyl;
      else if (molecule.atoms[other]!.isAromatic) shift += aryl;
      else if (molecule.atoms[other]!.element === 'C') shift += 0.2;
    }
  };
  effects(atom, partner, 1.2, 0.6, 1.4);
  if (partner !== undefined) effects(partner, atom, -1.1, 1.15, 0.1);
  return round(shift);
}

function round(value: number): number {
  return Math.round(value * 100) / 100;
}
