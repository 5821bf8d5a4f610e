import { type ChosenCoupling, chooseCouplings } from './chooseCouplings.js';
import { couplingCandidates } from './couplingCandidates.js';
import type { MethodSpecies } from './method.js';

/** One signal couples to another of the same species. */
export interface Coupling {
  /** Signal ids. */
  readonly a: string;
  readonly b: string;
  readonly couplingHz: number;
  /** 1: every nucleus of a couples to every nucleus of b. k: the nuclei fall into k sets, each coupling within its set only. */
  readonly sets: number;
  readonly origin: 'given' | 'inferred';
}

/** Listed splitting by neighbours that no signal of the species explains (another nucleus, or a signal that is not listed). */
export interface Unexplained {
  readonly neighbours: number;
  /** Absent when the listing gives none. */
  readonly couplingHz?: number;
}

/** Who couples to whom in a species, as far as method and listed couplings tell. */
export interface CouplingNetwork {
  readonly couplings: readonly Coupling[];
  /** signal id -> what its pattern shows beyond `couplings`; empty for `m`. */
  readonly unexplained: ReadonlyMap<string, readonly Unexplained[]>;
  /** Given couplings that the listed patterns contradict; they are not used. */
  readonly contradictions: readonly { readonly a: string; readonly b: string; readonly couplingHz: number }[];
  /** Signals whose partners could be chosen in more than one way; their patterns stay first order. */
  readonly ambiguous: readonly string[];
}

/** Two protons of one sp3 carbon couple by -12 to -18 Hz; no neighbours on sp3 carbons reach that (common practice). */
const geminalFromHz = 12.5;
const sp2FromPpm = 5.2;

const known = new WeakMap<MethodSpecies, CouplingNetwork>();

/**
 * Finds the coupling partners inside a species: those that `coupled` names, and those that the listed couplings leave one
 * choice for (same J within 0.3 Hz, counts of nuclei that the patterns can show).
 *
 * @param species  as read from the method
 * @returns couplings (Hz) with their sets, and what stays unexplained, contradicted or ambiguous
 * @source  n + 1 rule; the number of couplings counted from either side must agree (common practice)
 */
export function couplingNetwork(species: MethodSpecies): CouplingNetwork {
  const before = known.get(species);
  if (before !== undefined) return before;
  const network = build(species);
  known.set(species, network);
  return network;
}

function build(species: MethodSpecies): CouplingNetwork {
  const candidates = couplingCandidates(species);
  const { chosen, refused, ambiguous } = chooseCouplings(species, candidates);
  return {
    couplings: chosen.map(({ candidate, sets }) => ({
      a: species.signals[candidate.a]!.id,
      b: species.signals[candidate.b]!.id,
      couplingHz: signed(species, candidate),
      sets,
      origin: candidate.origin,
    })),
    unexplained: new Map(species.signals.map((signal, index) => [signal.id, leftOver(species, index, chosen)])),
    contradictions: refused.map(({ a, b, couplingHz }) => ({
      a: species.signals[a]!.id,
      b: species.signals[b]!.id,
      couplingHz,
    })),
    ambiguous: ambiguous.map((index) => species.signals[index]!.id),
  };
}

/** Listings print sizes, but two protons of one CH2 couple with a negative sign, which a strongly coupled pattern shows. */
function signed(species: MethodSpecies, { a, b, couplingHz, origin }: ChosenCoupling['candidate']): number {
  const ends = [species.signals[a]!, species.signals[b]!];
  const isGeminal =
    Math.abs(couplingHz) >= geminalFromHz &&
    ends.every(({ nuclei, shiftPpm }) => nuclei === 1 && shiftPpm > 0 && shiftPpm < sp2FromPpm);
  return origin === 'inferred' && isGeminal ? -Math.abs(couplingHz) : couplingHz;
}

function leftOver(species: MethodSpecies, index: number, chosen: readonly ChosenCoupling[]): Unexplained[] {
  return species.signals[index]!.pattern.splittings.flatMap(({ neighbours, couplingHz }, splitting) => {
    const taken = chosen
      .flatMap((choice) => choice.uses)
      .filter((use) => use.signal === index && use.splitting === splitting)
      .reduce((sum, use) => sum + use.neighbours, 0);
    const rest = neighbours - taken;
    return rest > 0 ? [{ neighbours: rest, ...(couplingHz !== undefined ? { couplingHz } : {}) }] : [];
  });
}
