import type { MethodSignal, MethodSpecies } from './method.js';
import { structureHints } from './structureHints.js';

/** Two listed couplings are one when they agree this well: papers print 0.1 Hz and rarely agree better than 0.2 Hz. */
export const sameCouplingHz = 0.3;
/** A given coupling may lie this far from the listed one, because a quintet lists the mean of its two couplings. */
const givenCouplingHz = 1;
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
        const options = optionsOf(signals, a, b, given, true);
        candidates.push({ a, b, couplingHz: given, origin: 'given', options });
      } else if (signals[a]!.coupled === undefined && signals[b]!.coupled === undefined) {
        const inferred = inferredCoupling(signals, a, b);
        if (inferred === undefined) continue;
        const said = hint(a, b);
        if (said === 'neighbours' || (said === 'unknown' && !hasRival(signals, a, b))) candidates.push(inferred);
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

function inferredCoupling(signals: readonly MethodSignal[], a: number, b: number): Candidate | undefined {
  const listed = (index: number) => signals[index]!.pattern.splittings.map(({ couplingHz }) => couplingHz);
  const pairs = listed(a).flatMap((left) => listed(b).map((right) => [left ?? right, right ?? left] as const));
  const close = pairs.flatMap(([left, right]) =>
    left !== undefined && right !== undefined && Math.abs(Math.abs(left) - Math.abs(right)) <= sameCouplingHz
      ? [{ couplingHz: (left + right) / 2, apart: Math.abs(left - right) }]
      : [],
  );
  const best = close.sort((x, y) => x.apart - y.apart || x.couplingHz - y.couplingHz)[0];
  if (best === undefined) return undefined;
  const options = optionsOf(signals, a, b, best.couplingHz, false);
  return options.length > 0 ? { a, b, couplingHz: best.couplingHz, origin: 'inferred', options } : undefined;
}

function optionsOf(signals: readonly MethodSignal[], a: number, b: number, couplingHz: number, isGiven: boolean): Option[] {
  const left = places(signals[a]!, couplingHz, isGiven);
  const right = places(signals[b]!, couplingHz, isGiven);
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

function places(signal: MethodSignal, couplingHz: number, isGiven: boolean): { splitting: number; capacity: number }[] {
  const unlisted = { splitting: -1, capacity: Number.POSITIVE_INFINITY };
  if (signal.pattern.isMultiplet) return isGiven ? [unlisted] : [];
  const within = isGiven ? givenCouplingHz : sameCouplingHz;
  const listed = signal.pattern.splittings
    .map((splitting, index) => ({
      splitting: index,
      capacity: splitting.neighbours,
      apart: Math.abs(Math.abs(splitting.couplingHz ?? couplingHz) - Math.abs(couplingHz)),
    }))
    .filter(({ apart }) => apart <= within + 1e-9)
    .sort((x, y) => x.apart - y.apart);
  return listed.length === 0 && isGiven && Math.abs(couplingHz) < unresolvedHz ? [unlisted] : listed;
}
