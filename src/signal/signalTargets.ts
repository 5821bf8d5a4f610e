import { expectedLines } from '../method/expectedLines.js';
import type { Method, MethodSignal, MethodSpecies } from '../method/method.js';
import { pascalRow } from '../pattern/firstOrderLines.js';
import type { Line, Pattern } from '../pattern/pattern.js';
import type { TermLine } from './regionModel.js';

/** One signal of the method with the lines that it should show at this field. */
export interface Target {
  readonly key: string;
  readonly species: MethodSpecies;
  readonly signal: MethodSignal;
  /** Empty when the method declares no lines (`m`). */
  readonly lines: readonly TermLine[];
  /** Offsets of the outermost lines that show, Hz: [lowest, highest]; faint combination lines may lie far outside. */
  readonly spanHz: readonly [number, number];
  /** Listed couplings, Hz, in the order of `perCoupling`. */
  readonly couplingsHz: readonly number[];
}

/** Lines below this share of the tallest are drawn but do not widen a window. */
const faintShare = 0.01;

/** A signal that wanders is sought this many times further, and at least this far. */
const movingFactor = 3;
const movingPpm = 0.15;

/** How far from its listed shift a signal is sought, ppm. */
export function reachPpm({ withinPpm, moves }: Pick<MethodSignal, 'withinPpm' | 'moves'>): number {
  return moves ? Math.max(movingFactor * withinPpm, movingPpm) : withinPpm;
}

const remembered = new WeakMap<MethodSpecies, Map<number, ReadonlyMap<string, readonly Line[]>>>();

/**
 * Every signal of a method with its expected lines at a field. The lines depend on species and field alone, so they are
 * computed once for a run.
 *
 * @param observeMhz MHz of the observed nucleus
 * @returns in method order
 * @source  `expectedLines`
 */
export function signalTargets(method: Method, observeMhz: number): Target[] {
  return method.species.flatMap((species) => {
    const lines = linesOf(species, observeMhz);
    return species.signals.map((signal) => {
      const couplingsHz = declaredCouplings(signal.pattern);
      const own = lines.get(signal.id) ?? [];
      return {
        key: signal.key,
        species,
        signal,
        lines: withCouplings(own, signal.pattern, couplingsHz),
        spanHz: spanOf(own),
        couplingsHz,
      };
    });
  });
}

function linesOf(species: MethodSpecies, observeMhz: number): ReadonlyMap<string, readonly Line[]> {
  const byField = remembered.get(species) ?? new Map<number, ReadonlyMap<string, readonly Line[]>>();
  remembered.set(species, byField);
  const known = byField.get(observeMhz);
  if (known !== undefined) return known;
  const lines = expectedLines(species, observeMhz);
  byField.set(observeMhz, lines);
  return lines;
}

function spanOf(lines: readonly Line[]): readonly [number, number] {
  const tallest = Math.max(...lines.map(({ share }) => share));
  const shown = lines.filter(({ share }) => share > faintShare * tallest).map(({ offsetHz }) => offsetHz);
  return lines.length === 0 ? [0, 0] : [Math.min(...shown), Math.max(...shown)];
}

/** Couplings when every splitting gives one; otherwise none, because then the offsets cannot be told apart. */
function declaredCouplings(pattern: Pattern): number[] {
  const couplings = pattern.splittings.flatMap(({ couplingHz }) => (couplingHz === undefined ? [] : [Math.abs(couplingHz)]));
  return couplings.length === pattern.splittings.length ? couplings : [];
}

/** Levels this close to a line all belong to it. */
const sameHz = 0.05;

/**
 * Says how each line moves when a listed coupling changes: as the first-order line there does, whose offset is sum m(k) J(k).
 * A first-order pattern is taken apart into all its lines, so that lines which coincide by chance may part. Near strong
 * coupling the motion is rough, which is enough for corrections of a tenth of a hertz.
 *
 * @param lines shape (n), Hz from the signal's shift
 */
export function withCouplings(lines: readonly Line[], pattern: Pattern, couplingsHz: readonly number[]): TermLine[] {
  if (couplingsHz.length === 0) return lines.map((line) => ({ ...line, perCoupling: [] }));
  const levels = levelsOf(pattern, couplingsHz);
  const own = lines.map((line) => {
    const near = levels.filter(({ offsetHz }) => Math.abs(offsetHz - line.offsetHz) < sameHz);
    const chosen = near.length > 0 ? near : [nearest(levels, line.offsetHz)];
    const weight = chosen.reduce((sum, { share }) => sum + share, 0);
    const perCoupling = couplingsHz.map(
      (_, k) => chosen.reduce((sum, level) => sum + level.share * level.perCoupling[k]!, 0) / weight,
    );
    return { line: { ...line, perCoupling }, isFirstOrder: near.length > 0 && Math.abs(weight - line.share) < 1e-3 };
  });
  const isFirstOrder = own.every((one) => one.isFirstOrder) && lines.length > 0;
  return isFirstOrder ? levels.sort((a, b) => b.offsetHz - a.offsetHz) : own.map(({ line }) => line);
}

/** Every line of a first-order pattern by itself, coincident ones apart. */
export function levelsOf(pattern: Pick<Pattern, 'splittings'>, couplingsHz: readonly number[]): TermLine[] {
  let levels: TermLine[] = [{ offsetHz: 0, share: 1, perCoupling: [] }];
  pattern.splittings.forEach(({ neighbours }, k) => {
    const row = pascalRow(neighbours);
    const total = 2 ** neighbours;
    levels = levels.flatMap(({ offsetHz, share, perCoupling }) =>
      row.map((weight, step) => {
        const m = neighbours / 2 - step;
        return { offsetHz: offsetHz + m * couplingsHz[k]!, share: (share * weight) / total, perCoupling: [...perCoupling, m] };
      }),
    );
  });
  return levels;
}

function nearest(levels: readonly TermLine[], offsetHz: number): TermLine {
  return levels.reduce((best, level) =>
    Math.abs(level.offsetHz - offsetHz) < Math.abs(best.offsetHz - offsetHz) ? level : best,
  );
}
