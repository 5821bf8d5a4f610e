import type { Spectrum } from '../spectrum/spectrum.js';
import { reachPpm, type Target } from './signalTargets.js';

/** Where a signal was found before fitting. */
export interface Located {
  readonly shiftHz: number;
  /** Whether there is more than noise there: only then may the fit move the shift. */
  readonly isPresent: boolean;
  /** Gain in chi-square of placing the pattern there. */
  readonly gain: number;
}

/** A gain in chi-square that noise alone reaches in fewer than 1 of 10,000 searches over some hundred places. */
const gainMin = 30;
/** Power of the lines under a misfitting pattern, in units of the noise, from which something is surely there. */
const powerMin = 150;
const kernelWidths = 4;
/** Most shifts lie within this share of their search window (common practice: 0.02 of 0.05 ppm after referencing). */
const usualShare = 0.4;
/** A signal of less than this share of its strongest neighbour's gain (a seventh of its height) cannot hold its own against what that leaves. */
const weakShare = 0.02;
const weakUsualShare = 0.12;

/**
 * Finds the place of each declared pattern inside its search window: lines are weighed by a matched filter, and a place counts
 * by how well the whole pattern fits there, less what does not fit. The strongest is placed first and taken away before the
 * next one is sought, so that two signals never claim the same lines.
 *
 * @param targets signals with lines; the others are left out of the result
 * @param widthHz line width of this spectrum
 * @returns by key
 * @source  matched filter (textbook); order of search: own
 */
export function locateSignals(spectrum: Spectrum, targets: readonly Target[], widthHz: number): Map<string, Located> {
  const located = new Map<string, Located>();
  const left = Float64Array.from(spectrum.real);
  for (const group of overlapping(
    targets.filter(({ lines }) => lines.length > 0),
    spectrum.observeMhz,
    widthHz,
  )) {
    const open = new Set(group);
    let strongest = 0;
    while (open.size > 0) {
      const candidates = [...open].map((target) => ({ target, place: steadyPlace(spectrum, left, target, widthHz, strongest) }));
      candidates.sort((a, b) => b.place.score - a.place.score || (a.target.key < b.target.key ? -1 : 1));
      const { target, place } = candidates[0]!;
      open.delete(target);
      strongest = Math.max(strongest, place.gain);
      // Strong lines that the pattern does not fit are placed too: the verdict will say that they differ.
      const isPresent = place.gain > gainMin || place.power > powerMin;
      const shiftHz = isPresent ? place.shiftHz : target.signal.shiftPpm * spectrum.observeMhz;
      located.set(target.key, { shiftHz, isPresent, gain: place.gain });
      if (isPresent) takeAway(spectrum, left, target, place, widthHz);
    }
  }
  return located;
}

/**
 * The place of a signal; a weak one beside a strong one stays near where it is listed, for what the strong one leaves of itself would
 * draw it in.
 */
function steadyPlace(spectrum: Spectrum, left: Float64Array, target: Target, widthHz: number, strongest: number): Place {
  const place = bestPlace(spectrum, left, target, widthHz, usualShare);
  return place.gain < weakShare * strongest && !target.signal.moves
    ? bestPlace(spectrum, left, target, widthHz, weakUsualShare)
    : place;
}

/** Lines that matter for finding a place: the faint ones of strong coupling do not. */
function shownLines({ lines }: Target): Target['lines'] {
  const tallest = lines.reduce((most, { share }) => Math.max(most, share), 0);
  return lines.filter(({ share }) => share > 0.02 * tallest);
}

interface Place {
  readonly shiftHz: number;
  readonly gain: number;
  readonly area: number;
  /** Gain without the misfit taken off. */
  readonly power: number;
  /** Gain, less for a place far from where the signal is listed: of two signals that could claim a line, the nearer one does. */
  readonly score: number;
}

function bestPlace(spectrum: Spectrum, left: Float64Array, target: Target, widthHz: number, share: number): Place {
  const { observeMhz, firstPpm, stepHz, noise } = spectrum;
  const { signal } = target;
  const lines = shownLines(target);
  const width = signal.pattern.isBroad ? 8 * widthHz : widthHz;
  const firstHz = firstPpm * observeMhz;
  const centre = signal.shiftPpm * observeMhz;
  const reach = reachPpm(signal) * observeMhz;
  const high = centre + reach + target.spanHz[1];
  const low = centre - reach + target.spanHz[0];
  const from = Math.max(0, Math.floor((firstHz - high) / stepHz) - 1);
  const to = Math.min(left.length, Math.ceil((firstHz - low) / stepHz) + 2);
  const none = { shiftHz: centre, gain: 0, area: 0, power: 0, score: 0 };
  if (to - from < 3) return none;
  const { filtered, energy } = matched(left, from, to, width, stepHz);
  const expected = expectedResponses(lines, width, stepHz);
  const shares = expected.reduce((sum, value) => sum + value * value, 0);
  let best: Place = none;
  let strongest: Place = none;
  const step = Math.max(1, Math.floor(width / (5 * stepHz)));
  const start = Math.max(0, Math.ceil((firstHz - (centre + reach)) / stepHz));
  const end = Math.min(left.length - 1, Math.floor((firstHz - (centre - reach)) / stepHz));
  for (let index = start; index <= end; index += step) {
    const shiftHz = firstHz - index * stepHz;
    let area = 0;
    for (const [k, { offsetHz }] of lines.entries()) {
      area += expected[k]! * (filtered[Math.round(index - offsetHz / stepHz) - from] ?? 0);
    }
    area /= shares;
    if (area <= 0) continue;
    let misfit = 0;
    for (const [k, { offsetHz }] of lines.entries()) {
      misfit += ((filtered[Math.round(index - offsetHz / stepHz) - from] ?? 0) - expected[k]! * area) ** 2;
    }
    const power = (area * area * shares * energy) / (noise * noise);
    const gain = power - (misfit * energy) / (noise * noise);
    const off = (shiftHz - centre) / (signal.moves ? reach : share * reach);
    const score = gain * Math.exp(-off * off);
    if (score > best.score) best = { shiftHz, gain, area, score, power };
    if (power * Math.exp(-off * off) > strongest.power)
      strongest = { shiftHz, gain, area, power: power * Math.exp(-off * off), score: 0 };
  }
  return best.score > 0 ? best : strongest;
}

/** What the matched filter answers at each line of a pattern of unit area: its own share and what neighbours add. */
function expectedResponses(lines: Target['lines'], widthHz: number, stepHz: number): number[] {
  const { kernel, energy, reach } = kernelOf(widthHz, stepHz);
  const answer = (apartHz: number) => {
    let sum = 0;
    for (let k = -reach; k <= reach; k += 1) {
      const u = (2 * (k * stepHz - apartHz)) / widthHz;
      sum += (2 * kernel[k + reach]!) / (Math.PI * widthHz * (1 + u * u));
    }
    return sum / energy;
  };
  const far = (kernelWidths + 4) * widthHz;
  return lines.map((line) => {
    let sum = 0;
    for (const { offsetHz, share } of lines) {
      const apart = Math.abs(offsetHz - line.offsetHz);
      if (apart < far) sum += share * answer(apart);
    }
    return sum;
  });
}

/** A Lorentzian without its mean, so that a level does not answer. */
function kernelOf(widthHz: number, stepHz: number) {
  const reach = Math.ceil((kernelWidths * widthHz) / stepHz);
  const kernel = new Float64Array(2 * reach + 1);
  let mean = 0;
  for (let k = 0; k < kernel.length; k += 1) {
    const u = (2 * (k - reach) * stepHz) / widthHz;
    kernel[k] = 2 / (Math.PI * widthHz * (1 + u * u));
    mean += kernel[k]! / kernel.length;
  }
  let energy = 0;
  for (let k = 0; k < kernel.length; k += 1) {
    kernel[k] = kernel[k]! - mean;
    energy += kernel[k]! ** 2;
  }
  return { kernel, energy, reach };
}

/** Least-squares area of one Lorentzian at every point, and the energy of the kernel. */
function matched(data: Float64Array, from: number, to: number, widthHz: number, stepHz: number) {
  const { kernel, energy, reach } = kernelOf(widthHz, stepHz);
  const filtered = new Float64Array(to - from);
  for (let i = from; i < to; i += 1) {
    let sum = 0;
    for (let k = -reach; k <= reach; k += 1) sum += (data[i + k] ?? 0) * kernel[k + reach]!;
    filtered[i - from] = sum / energy;
  }
  return { filtered, energy };
}

function takeAway(spectrum: Spectrum, left: Float64Array, target: Target, place: Place, widthHz: number): void {
  const { stepHz, firstPpm, observeMhz } = spectrum;
  const width = target.signal.pattern.isBroad ? 8 * widthHz : widthHz;
  for (const { offsetHz, share } of target.lines) {
    const at = (firstPpm * observeMhz - place.shiftHz - offsetHz) / stepHz;
    const reach = Math.ceil((20 * width) / stepHz);
    for (let i = Math.max(0, Math.floor(at - reach)); i <= Math.min(left.length - 1, at + reach); i += 1) {
      const u = (2 * (i - at) * stepHz) / width;
      left[i] = left[i]! - (place.area * share * 2) / (Math.PI * width * (1 + u * u));
    }
  }
}

/** Groups of targets whose search windows touch. */
function overlapping(targets: readonly Target[], observeMhz: number, widthHz: number): Target[][] {
  const spans = targets
    .map((target) => {
      const { shiftPpm } = target.signal;
      const reach = reachPpm(target.signal) * observeMhz + 2 * widthHz;
      const centre = shiftPpm * observeMhz;
      return { target, low: centre - reach + target.spanHz[0], high: centre + reach + target.spanHz[1] };
    })
    .sort((a, b) => b.high - a.high);
  const groups: Target[][] = [];
  let bottom = Number.POSITIVE_INFINITY;
  for (const { target, low, high } of spans) {
    if (high >= bottom) groups.at(-1)!.push(target);
    else groups.push([target]);
    bottom = groups.at(-1)!.length === 1 ? low : Math.min(bottom, low);
  }
  return groups;
}
