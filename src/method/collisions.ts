import type { Line } from '../pattern/pattern.js';
import { areaInflation } from './areaInflation.js';
import { expectedLines } from './expectedLines.js';
import type { Method } from './method.js';
import { extent, overlapShare, type PlacedPattern } from './overlapShare.js';

/** Two signals of different species that lie on each other at a field. */
export interface Collision {
  readonly observeMhz: number;
  /** Keys of the signals. */
  readonly a: string;
  readonly b: string;
  /** 0 to 1; absent when one of them declares no lines. */
  readonly overlap?: number;
  /** Factors of the areas' standard uncertainties, fitted together against alone; Infinity: cannot be told apart. */
  readonly uFactorA?: number;
  readonly uFactorB?: number;
  /** Sentence for people. */
  readonly message: string;
}

/** Less is only the far tails of Lorentzian lines on each other. */
const overlapMin = 0.05;
/** Below it an integral is wrong by less than the overlap, and may still serve. */
const overlapIntegrable = 0.1;
/** A fit costs nothing worth telling below this factor. */
const factorMin = 1.05;
const factorHard = 5;
const factorHopeless = 20;
/** Signals whose outer lines are this many widths apart are fitted on their own. */
const apartWidths = 25;

/** A signal that the tube shows beside the species: residual solvent, water. */
export interface BackgroundSignal {
  /** As it is named in sentences, e.g. `residual CDCl3`. */
  readonly name: string;
  readonly shiftPpm: number;
  readonly lines: readonly Line[];
}

interface Placed extends PlacedPattern {
  readonly key: string;
  readonly species: string;
  readonly isIgnored: boolean;
  /** Where undeclared lines may lie, ppm. */
  readonly rangePpm: readonly [number, number];
}

/**
 * Pairs of signals of different species that overlap at a field, with what that costs.
 *
 * @param method      as read; signals with `use: ignore` count as the other half of a pair only
 * @param observeMhz  MHz
 * @param widthHz     full width at half height of a line, Hz
 * @param background  signals of the tube
 * @returns in order of the method, the background last
 */
export function findCollisions(
  method: Method,
  observeMhz: number,
  widthHz: number,
  background: readonly BackgroundSignal[] = [],
): Collision[] {
  const placed = [...placeSignals(method, observeMhz), ...placeBackground(background, observeMhz)];
  const found: Collision[] = [];
  for (const [index, a] of placed.entries()) {
    for (const b of placed.slice(index + 1)) {
      if (a.species === b.species || (a.isIgnored && b.isIgnored)) continue;
      const collision =
        a.lines.length > 0 && b.lines.length > 0 ? ofLines(a, b, observeMhz, widthHz) : ofRange(a, b, observeMhz, widthHz);
      if (collision !== undefined) found.push(collision);
    }
  }
  return found;
}

/**
 * For every signal of a method the factor by which its area's standard uncertainty grows when its whole region is fitted.
 *
 * @returns signal key -> factor, 1 for a signal alone
 */
export function fitInflation(method: Method, observeMhz: number, widthHz: number): ReadonlyMap<string, number> {
  const placed = placeSignals(method, observeMhz).filter(({ lines }) => lines.length > 0);
  const regions: Placed[][] = [];
  for (const one of placed) {
    const touching = regions.filter((region) => region.some((other) => isNear(one, other, widthHz)));
    const joined = [...touching.flat(), one];
    regions.splice(0, regions.length, ...regions.filter((region) => !touching.includes(region)), joined);
  }
  return new Map(
    regions.flatMap((region) => {
      const factors = region.length > 1 ? areaInflation(region, widthHz) : [1];
      return region.map(({ key }, index) => [key, factors[index]!] as const);
    }),
  );
}

function placeSignals(method: Method, observeMhz: number): Placed[] {
  return method.species.flatMap((species) => {
    const lines = expectedLines(species, observeMhz);
    return species.signals.map(({ id, key, use, shiftPpm, withinPpm, rangePpm }) => ({
      key,
      species: species.id,
      isIgnored: use === 'ignore',
      centreHz: shiftPpm * observeMhz,
      lines: lines.get(id) ?? [],
      rangePpm: rangePpm ?? ([shiftPpm - withinPpm, shiftPpm + withinPpm] as const),
    }));
  });
}

function placeBackground(background: readonly BackgroundSignal[], observeMhz: number): Placed[] {
  return background.map(({ name, shiftPpm, lines }) => ({
    key: name,
    species: '',
    isIgnored: true,
    centreHz: shiftPpm * observeMhz,
    lines,
    rangePpm: [shiftPpm, shiftPpm] as const,
  }));
}

function isNear(a: Placed, b: Placed, widthHz: number): boolean {
  const [lowA, highA] = extent(a);
  const [lowB, highB] = extent(b);
  return lowA - highB < apartWidths * widthHz && lowB - highA < apartWidths * widthHz;
}

function ofLines(a: Placed, b: Placed, observeMhz: number, widthHz: number): Collision | undefined {
  if (!isNear(a, b, widthHz)) return undefined;
  const overlap = overlapShare(a, b, widthHz);
  const [uFactorA, uFactorB] = areaInflation([a, b], widthHz) as [number, number];
  if (overlap < overlapMin && Math.max(uFactorA, uFactorB) < factorMin) return undefined;
  const factor = Math.max(uFactorA, uFactorB);
  const percent = Math.round(100 * overlap);
  const plain =
    overlap < overlapIntegrable ? `plain integration is off by up to ${percent} %` : 'not measurable by plain integration';
  const head = `at ${plainMhz(observeMhz)} MHz ${a.key} and ${b.key} overlap by ${percent} %: ${plain}, `;
  const fit =
    factor > factorHopeless
      ? 'nor by fit: the two patterns cannot be told apart'
      : factor > factorHard
        ? `hardly measurable by fit, with u times ${factor.toFixed(0)}`
        : `measurable by fit with u times ${factor.toFixed(1)}`;
  return { observeMhz, a: a.key, b: b.key, overlap, uFactorA, uFactorB, message: head + fit };
}

/** A multiplet without declared lines fills its range. */
function ofRange(a: Placed, b: Placed, observeMhz: number, widthHz: number): Collision | undefined {
  const [lowA, highA] = range(a, observeMhz, widthHz);
  const [lowB, highB] = range(b, observeMhz, widthHz);
  if (highA < lowB || highB < lowA) return undefined;
  const [open, other] = a.lines.length === 0 ? [a, b] : [b, a];
  const head = `at ${plainMhz(observeMhz)} MHz ${other.key} lies within ${open.key}, whose lines are not declared`;
  const message = `${head}: the two cannot be told apart there`;
  return { observeMhz, a: a.key, b: b.key, message };
}

function range(placed: Placed, observeMhz: number, widthHz: number): readonly [number, number] {
  if (placed.lines.length > 0) {
    const [low, high] = extent(placed);
    return [low - 2 * widthHz, high + 2 * widthHz];
  }
  const [low, high] = placed.rangePpm;
  return [low * observeMhz, high * observeMhz];
}

function plainMhz(observeMhz: number): string {
  return String(Math.round(observeMhz * 100) / 100);
}
