import type { Candidate, Option, Use } from './couplingCandidates.js';
import type { MethodSpecies } from './method.js';

/** A candidate taken as true, in one of its options. */
export interface ChosenCoupling {
  readonly candidate: Candidate;
  readonly sets: number;
  readonly uses: readonly Use[];
}

interface Choice {
  readonly chosen: readonly ChosenCoupling[];
  /** Given candidates that no choice can hold. */
  readonly refused: readonly Candidate[];
  /** Indices of signals whose partners are not determined. */
  readonly ambiguous: readonly number[];
}

/** Search steps for one connected set of candidates; beyond it the partners count as not determined. */
const stepsMax = 50_000;

/**
 * Chooses which candidates are true: the choice that explains most of the listed splittings, when only one does.
 *
 * @param species     its signals give how many neighbours each splitting has to offer
 * @param candidates  pairs that may couple
 * @returns the chosen couplings, the given ones that the listed patterns contradict, and the undetermined signals
 */
export function chooseCouplings(species: MethodSpecies, candidates: readonly Candidate[]): Choice {
  const room = species.signals.map((signal) => signal.pattern.splittings.map(({ neighbours }) => neighbours));
  const chosen: ChosenCoupling[] = [];
  const refused: Candidate[] = [];
  const ambiguous: number[] = [];
  for (const part of connectedParts(candidates)) {
    const given = part.filter(({ origin }) => origin === 'given');
    const best = bestChoice(part, room);
    if (best.isUnique) chosen.push(...best.chosen);
    else {
      // The given ones stand even where the inferred ones are open.
      const firm = bestChoice(given, room);
      if (firm.isUnique) chosen.push(...firm.chosen);
      const settled = new Set(firm.isUnique ? firm.chosen.flatMap(({ candidate }) => [candidate.a, candidate.b]) : []);
      ambiguous.push(...new Set(part.flatMap(({ a, b }) => [a, b]).filter((index) => !settled.has(index))));
    }
    refused.push(...given.filter((candidate) => !chosen.some((choice) => choice.candidate === candidate)));
  }
  return { chosen, refused, ambiguous: ambiguous.sort((a, b) => a - b) };
}

function connectedParts(candidates: readonly Candidate[]): Candidate[][] {
  const parts: Candidate[][] = [];
  for (const candidate of candidates) {
    const touching = parts.filter((part) =>
      part.some(({ a, b }) => a === candidate.a || a === candidate.b || b === candidate.a || b === candidate.b),
    );
    const joined = [...touching.flat(), candidate];
    parts.splice(0, parts.length, ...parts.filter((part) => !touching.includes(part)), joined);
  }
  return parts;
}

interface Best {
  chosen: readonly ChosenCoupling[];
  score: number;
  isUnique: boolean;
}

/** Exhaustive, because a species has few candidates; a given coupling outweighs any number of inferred ones. */
function bestChoice(candidates: readonly Candidate[], room: readonly (readonly number[])[]): Best {
  const left = room.map((splittings) => [...splittings]);
  const best: Best = { chosen: [], score: 0, isUnique: true };
  const taken: ChosenCoupling[] = [];
  let steps = 0;
  const visit = (index: number, score: number): void => {
    if (++steps > stepsMax) return;
    const candidate = candidates[index];
    if (candidate === undefined) {
      note(best, taken, score);
      return;
    }
    for (const option of candidate.options) {
      if (!option.uses.every((use) => use.splitting < 0 || left[use.signal]![use.splitting]! >= use.neighbours)) continue;
      change(left, option, -1);
      taken.push({ candidate, sets: option.sets, uses: option.uses });
      visit(index + 1, score + scoreOf(candidate, option));
      taken.pop();
      change(left, option, 1);
    }
    visit(index + 1, score);
  };
  visit(0, 0);
  return steps > stepsMax ? { ...best, isUnique: false } : best;
}

function scoreOf(candidate: Candidate, option: Option): number {
  const explained = option.uses.reduce((sum, use) => sum + (use.splitting < 0 ? 0 : use.neighbours), 0);
  return explained + (candidate.origin === 'given' ? 1000 : 0);
}

function change(left: number[][], option: Option, sign: number): void {
  for (const use of option.uses) if (use.splitting >= 0) left[use.signal]![use.splitting]! += sign * use.neighbours;
}

function note(best: Best, taken: readonly ChosenCoupling[], score: number): void {
  if (score < best.score) return;
  if (score > best.score) {
    best.chosen = [...taken];
    best.score = score;
    best.isUnique = true;
  } else if (describe(taken) !== describe(best.chosen)) best.isUnique = false;
}

/** Which pairs couple and in how many sets; which splitting of equal coupling they use makes no difference. */
function describe(chosen: readonly ChosenCoupling[]): string {
  return chosen.map(({ candidate, sets }) => `${candidate.a}-${candidate.b}:${sets}`).join(' ');
}
