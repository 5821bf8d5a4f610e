import { exactLines, isSolvable } from '../pattern/exactLines.js';
import { coincidentHz, firstOrderLines, pascalRow } from '../pattern/firstOrderLines.js';
import { mergeLines } from '../pattern/mergeLines.js';
import type { Line } from '../pattern/pattern.js';
import { splitLines } from '../pattern/splitLines.js';
import { type CouplingNetwork, couplingNetwork, type Unexplained } from './couplingNetwork.js';
import type { MethodSpecies } from './method.js';
import { type CoupledPart, coupledParts, spinSystemOf } from './spinSystemsOf.js';

/**
 * The lines that every signal of a species should show at a field. Where the coupling partners are known (`coupled`, or the
 * listed couplings leave one choice) the lines come from the spin Hamiltonian at that field, at any field: the first-order
 * pattern is its limit and is not a separate case. Listed splittings that no signal of the species explains (fluorine, a signal
 * that is not in the method) stay first order on top. Everything else is first order.
 *
 * @param species     as read from the method
 * @param observeMhz  MHz of the observed nucleus
 * @param shiftsPpm   signal id -> shift in ppm where it differs from the method (a fit moves a coupled system together)
 * @returns signal id -> lines, Hz from the signal's shift, descending, shares summing to 1; empty when no lines are declared
 *          (`m` without `coupled`, or a coupling that is not given)
 * @source  see `couplingNetwork`, `exactLines`, `firstOrderLines`
 */
export function expectedLines(
  species: MethodSpecies,
  observeMhz: number,
  shiftsPpm: Readonly<Record<string, number>> = {},
): ReadonlyMap<string, readonly Line[]> {
  const network = couplingNetwork(species);
  const shifts = new Map(species.signals.map((signal) => [signal.id, shiftsPpm[signal.id] ?? signal.shiftPpm]));
  const lines = new Map<string, readonly Line[]>(species.signals.map((signal) => [signal.id, firstOrderLines(signal.pattern)]));
  for (const part of coupledParts(species, network)) {
    for (const [id, own] of linesOfPart(part, shifts, observeMhz)) {
      const full = withUnexplained(own, network.unexplained.get(id) ?? []);
      if (full !== undefined) lines.set(id, full);
    }
  }
  return lines;
}

/** Ids of the signals of each coupled system of a species: these move together in a fit. */
export function coupledSignals(species: MethodSpecies): readonly (readonly string[])[] {
  return coupledParts(species, couplingNetwork(species)).map((part) => part.signals.map((signal) => signal.id));
}

function linesOfPart(part: CoupledPart, shifts: ReadonlyMap<string, number>, observeMhz: number): Map<string, readonly Line[]> {
  const system = spinSystemOf(part, shifts, observeMhz);
  if (isSolvable(system.groups.map((group) => group.nuclei))) return new Map(exactLines(system));
  // A long chain: each signal with its partners and theirs, or with its partners alone. What lies further away does not show.
  const lines = new Map<string, readonly Line[]>();
  for (const { id } of part.signals) {
    for (const reach of [2, 1]) {
      const near = within(part, id, reach);
      const system = spinSystemOf(near, shifts, observeMhz);
      if (!isSolvable(system.groups.map((group) => group.nuclei))) continue;
      const own = exactLines(system).get(id);
      if (own !== undefined) lines.set(id, own);
      break;
    }
  }
  return lines;
}

function within(part: CoupledPart, id: string, reach: number): CoupledPart {
  let ids = new Set([id]);
  for (let step = 0; step < reach; step++) {
    const next = part.couplings.filter(({ a, b }) => ids.has(a) || ids.has(b)).flatMap(({ a, b }) => [a, b]);
    ids = new Set([...ids, ...next]);
  }
  return {
    ...part,
    signals: part.signals.filter((signal) => ids.has(signal.id)),
    couplings: part.couplings.filter(({ a, b }) => ids.has(a) && ids.has(b)),
    inSets: new Set([...part.inSets].filter((own) => ids.has(own))),
  };
}

function withUnexplained(lines: readonly Line[], unexplained: readonly Unexplained[]): readonly Line[] | undefined {
  let full = lines;
  for (const { neighbours, couplingHz } of unexplained) {
    if (couplingHz === undefined) return undefined;
    full = mergeLines(splitLines(full, pascalRow(neighbours), Math.abs(couplingHz)), coincidentHz);
  }
  return full;
}

/** What a coupling network knows, for pages that explain it. */
export type { CouplingNetwork };
