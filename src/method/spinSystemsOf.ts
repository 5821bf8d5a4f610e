import type { SpinGroup, SpinSystem } from '../pattern/spinSystem.js';
import type { Coupling, CouplingNetwork } from './couplingNetwork.js';
import type { MethodSignal, MethodSpecies } from './method.js';

/** Usual couplings of a benzene ring where the method gives none (common practice). */
const metaHz = 2.5;
const paraHz = 0.5;
/** Between an ortho and a para proton of a phenyl group. */
const metaAcrossHz = 1.3;
/** Ortho couplings and shifts that mark two doublets as protons of one benzene ring (common practice). */
const orthoHz: readonly [number, number] = [6.5, 10];
const aromaticFromPpm = 5.8;

/** Signals that couple with each other, directly or through others. */
export interface CoupledPart {
  readonly signals: readonly MethodSignal[];
  readonly couplings: readonly Coupling[];
  /** Sets into which the nuclei of `inSets` fall; 1 when none do. */
  readonly sets: number;
  /** Ids of the signals whose nuclei fall into sets; the others are shared by all sets. */
  readonly inSets: ReadonlySet<string>;
}

/**
 * Divides the coupled signals of a species into parts that do not couple with each other.
 *
 * @returns parts of two and more signals; a part whose sets contradict each other is left out (it stays first order)
 */
export function coupledParts(species: MethodSpecies, network: CouplingNetwork): CoupledPart[] {
  const parts: string[][] = [];
  for (const { a, b } of network.couplings) {
    const touching = parts.filter((part) => part.includes(a) || part.includes(b));
    const joined = [...new Set([...touching.flat(), a, b])];
    parts.splice(0, parts.length, ...parts.filter((part) => !touching.includes(part)), joined);
  }
  return parts.flatMap((ids) => {
    const couplings = network.couplings.filter(({ a }) => ids.includes(a));
    const divided = couplings.filter((coupling) => coupling.sets > 1);
    const inSets = new Set(divided.flatMap(({ a, b }) => [a, b]));
    const sets = divided[0]?.sets ?? 1;
    const agrees =
      divided.every((coupling) => coupling.sets === sets) &&
      couplings.every((coupling) => coupling.sets > 1 || !(inSets.has(coupling.a) && inSets.has(coupling.b)));
    const signals = species.signals.filter((signal) => ids.includes(signal.id));
    return agrees ? [{ signals, couplings, sets, inSets }] : [];
  });
}

/**
 * The spin system of one coupled part. Nuclei in sets that nothing joins are solved for one set (two equal ethyl groups are one
 * ethyl group); where they couple across the sets (a para-disubstituted ring, a phenyl group) each set has its own spins.
 *
 * @param part         as divided by `coupledParts`
 * @param shiftsPpm    signal id -> shift, ppm
 * @param observeMhz   MHz
 * @returns groups with their frequencies and couplings, Hz
 * @source  AA'BB' and AA'BB'C with usual meta and para couplings (common practice)
 */
export function spinSystemOf(part: CoupledPart, shiftsPpm: ReadonlyMap<string, number>, observeMhz: number): SpinSystem {
  const cross = crossCouplings(part);
  const isJoined = part.inSets.size < part.signals.length || cross.some(({ likeHz, acrossHz }) => likeHz !== 0 || acrossHz !== 0);
  const copies = part.sets > 1 && isJoined ? part.sets : 1;
  const places = part.signals.flatMap((signal) => {
    const isDivided = part.inSets.has(signal.id);
    const nuclei = isDivided ? signal.nuclei / part.sets : signal.nuclei;
    return Array.from({ length: isDivided ? copies : 1 }, (_, set) => ({ signal, set: isDivided ? set : -1, nuclei }));
  });
  const groups: SpinGroup[] = places.map(({ signal, nuclei }) => ({
    signal: signal.id,
    nuclei,
    frequencyHz: (shiftsPpm.get(signal.id) ?? signal.shiftPpm) * observeMhz,
  }));
  const isRing = part.couplings.some((coupling) => isRingPair(part, coupling));
  const couplingsHz = places.map((left) =>
    places.map((right) => {
      if (left === right) return 0;
      if (left.signal === right.signal) return cross.find(({ id }) => id === left.signal.id)?.likeHz ?? 0;
      const coupling = part.couplings.find(
        ({ a, b }) => a + b === left.signal.id + right.signal.id || b + a === left.signal.id + right.signal.id,
      );
      const isApart = left.set >= 0 && right.set >= 0 && left.set !== right.set;
      if (coupling !== undefined) return isApart ? acrossOf(cross, left.signal.id, right.signal.id) : coupling.couplingHz;
      const isOrthoToPara = isRing && left.set < 0 !== right.set < 0 && left.nuclei === 1 && right.nuclei === 1;
      return isOrthoToPara ? metaAcrossHz : 0;
    }),
  );
  return { groups, couplingsHz };
}

interface Cross {
  readonly id: string;
  /** Between the nuclei of the signal itself, of different sets. */
  readonly likeHz: number;
  /** To the partner's nuclei of another set. */
  readonly acrossHz: number;
  readonly isGiven: boolean;
}

/** `cross_couplings_hz` of a signal is [to the partner's other nucleus, to its own like]; without it the usual ring values. */
function crossCouplings(part: CoupledPart): Cross[] {
  return part.signals.flatMap((signal) => {
    if (!part.inSets.has(signal.id)) return [];
    const isRing = part.couplings.some(
      ({ a, b, ...rest }) => (a === signal.id || b === signal.id) && isRingPair(part, { a, b, ...rest }),
    );
    const [acrossHz, likeHz] = signal.crossCouplingsHz ?? [];
    return [
      {
        id: signal.id,
        likeHz: likeHz ?? (isRing ? metaHz : 0),
        acrossHz: acrossHz ?? (isRing ? paraHz : 0),
        isGiven: acrossHz !== undefined,
      },
    ];
  });
}

function acrossOf(cross: readonly Cross[], a: string, b: string): number {
  const both = cross.filter(({ id }) => id === a || id === b);
  return (both.find(({ isGiven }) => isGiven) ?? both[0])?.acrossHz ?? 0;
}

function isRingPair(part: CoupledPart, { a, b, couplingHz, sets }: Coupling): boolean {
  const size = Math.abs(couplingHz);
  const ends = part.signals.filter((signal) => signal.id === a || signal.id === b);
  return (
    sets === 2 &&
    size >= orthoHz[0] &&
    size <= orthoHz[1] &&
    ends.every((signal) => signal.nuclei === 2 && signal.shiftPpm >= aromaticFromPpm)
  );
}
