import type { Splitting } from '../pattern/pattern.js';
import type { MethodSignal, MethodSpecies } from './method.js';
import { type Hint, structureHints } from './structureHints.js';

/** Two listed couplings are one when they agree this well: papers print 0.1 Hz and rarely agree better than 0.2 Hz. */
export const sameCouplingHz = 0.3;
/** A known partner's coupling may lie this far from the listed one, because a quintet lists the mean of its two couplings. */
const meanCouplingHz = 1;
/** A given coupling smaller than this need not show in the listed pattern. */
const unresolvedHz = 1.5;
/** Protons on sp2 and on sp3 carbon lie on either side of it (common practice). */
const regionPpm = 5.2;

/** Where a coupling takes its lines from in the listed pattern of one signal. */
export interface Use {
  /** Index of the signal. */
  readonly signal: number;
  /** Index of its splitting, or -1: the pattern (`m`, or one too coarse to show it) does not list it. */
  readonly splitting: number;
  /** Neighbours of that splitting that the coupling explains. */
  readonly neighbours: number;
}

/** One way in which a candidate could be true. */
export interface Option {
  readonly sets: number;
  readonly uses: readonly [Use, Use];
}

/** Two signals that may couple. */
export interface Candidate {
  readonly a: number;
  readonly b: number;
  readonly couplingHz: number;
  readonly origin: 'given' | 'inferred';
  readonly options: readonly Option[];
}

/**
 * Lists the pairs of signals that may couple: those given, and those whose listed couplings and counts allow it and whom the
 * structure, when there is one, does not place apart.
 */
export function couplingCandidates(species: MethodSpecies): Candidate[] {
  const { signals } = species;
  const candidates: Candidate[] = [];
  const hint = structureHints(species);
  for (let a = 0; a < signals.length; a++) {
    for (let b = a + 1; b < signals.length; b++) {
      const given = signals[a]!.coupled?.[signals[b]!.id] ?? signals[b]!.coupled?.[signals[a]!.id];
      if (given !== undefined && given !== 0) {
        const options = optionsOf(signals, a, b, { couplingHz: given, withinHz: meanCouplingHz }, true);
        candidates.push({ a, b, couplingHz: given, origin: 'given', options });
      } else if (signals[a]!.coupled === undefined && signals[b]!.coupled === undefined) {
        const said = hint(a, b);
        if (said === 'apart' || (said === 'unknown' && hasRival(signals, a, b))) continue;
        const inferred = inferredCoupling(signals, a, b, said);
        if (inferred !== undefined) candidates.push(inferred);
      }
    }
  }
  return candidates;
}

/**
 * A listed multiplet of unknown partners in the same region may be the true partner. A quartet of 2H and a triplet of 3H find
 * each other all the same; two doublets of 1H or two triplets of 2H prove nothing then.
 */
function hasRival(signals: readonly MethodSignal[], a: number, b: number): boolean {
  if (signals[a]!.nuclei !== signals[b]!.nuclei) return false;
  const isHigh = (signal: MethodSignal) => signal.shiftPpm >= regionPpm;
  return signals.some(
    (signal) =>
      signal.pattern.isMultiplet &&
      signal.coupled === undefined &&
      [a, b].some((index) => isHigh(signals[index]!) === isHigh(signal)),
  );
}

/**
 * The coupling that two listings share. A splitting by exactly the partner's nuclei lists its true size; a quintet or nonet
 * that sums several partners lists a mean, which may lie further off when the structure says that the two are neighbours.
 */
function inferredCoupling(signals: readonly MethodSignal[], a: number, b: number, said: Hint): Candidate | undefined {
  const isPure = ({ neighbours }: Splitting, nuclei: number) => nuclei % neighbours === 0;
  const close = signals[a]!.pattern.splittings.flatMap((left) =>
    signals[b]!.pattern.splittings.flatMap((right) => {
      const [here, there] = [left.couplingHz ?? right.couplingHz, right.couplingHz ?? left.couplingHz];
      if (here === undefined || there === undefined) return [];
      const [pureHere, pureThere] = [isPure(left, signals[b]!.nuclei), isPure(right, signals[a]!.nuclei)];
      const withinHz = said === 'neighbours' && !(pureHere && pureThere) ? meanCouplingHz : sameCouplingHz;
      const couplingHz = pureHere === pureThere ? (here + there) / 2 : pureHere ? here : there;
      return [{ couplingHz, withinHz, apart: Math.abs(Math.abs(here) - Math.abs(there)) }];
    }),
  );
  const best = close
    .filter(({ apart, withinHz }) => apart <= withinHz + 1e-9)
    .sort((x, y) => x.apart - y.apart || x.couplingHz - y.couplingHz)[0];
  if (best === undefined) return undefined;
  const options = optionsOf(signals, a, b, best, false);
  return options.length > 0 ? { a, b, couplingHz: best.couplingHz, origin: 'inferred', options } : undefined;
}

/** A coupling, and how far from it a listed one may lie. */
interface Sought {
  readonly couplingHz: number;
  readonly withinHz: number;
}

function optionsOf(signals: readonly MethodSignal[], a: number, b: number, sought: Sought, isGiven: boolean): Option[] {
  const left = places(signals[a]!, sought, isGiven);
  const right = places(signals[b]!, sought, isGiven);
  const nucleiA = signals[a]!.nuclei;
  const nucleiB = signals[b]!.nuclei;
  const options: Option[] = [];
  // Cross couplings are between sets, so whoever gives them says that there are some, even where the listing is a multiplet.
  const isDivided = [signals[a]!, signals[b]!].some(({ crossCouplingsHz }) => (crossCouplingsHz ?? []).length > 0);
  const fewest = isDivided && nucleiA % 2 === 0 && nucleiB % 2 === 0 ? 2 : 1;
  for (let sets = fewest; sets <= Math.min(nucleiA, nucleiB); sets++) {
    if (nucleiA % sets !== 0 || nucleiB % sets !== 0) continue;
    for (const { splitting: onA, capacity: roomA } of left) {
      for (const { splitting: onB, capacity: roomB } of right) {
        const useA = { signal: a, splitting: onA, neighbours: nucleiB / sets };
        const useB = { signal: b, splitting: onB, neighbours: nucleiA / sets };
        if (useA.neighbours <= roomA && useB.neighbours <= roomB) options.push({ sets, uses: [useA, useB] });
      }
    }
    // Nothing listed says that the nuclei fall into sets: every nucleus couples to every other.
    if (options.some(({ uses }) => uses.every((use) => use.splitting < 0))) break;
  }
  return options;
}

function places(
  signal: MethodSignal,
  { couplingHz, withinHz }: Sought,
  isGiven: boolean,
): { splitting: number; capacity: number }[] {
  const unlisted = { splitting: -1, capacity: Number.POSITIVE_INFINITY };
  if (signal.pattern.isMultiplet) return isGiven ? [unlisted] : [];
  const listed = signal.pattern.splittings
    .map((splitting, index) => ({
      splitting: index,
      capacity: splitting.neighbours,
      apart: Math.abs(Math.abs(splitting.couplingHz ?? couplingHz) - Math.abs(couplingHz)),
    }))
    .filter(({ apart }) => apart <= withinHz + 1e-9)
    .sort((x, y) => x.apart - y.apart);
  return listed.length === 0 && isGiven && Math.abs(couplingHz) < unresolvedHz ? [unlisted] : listed;
}
