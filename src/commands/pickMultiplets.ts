import type { FoundMultiplet } from '../method/listedFromMultiplets.js';
import { type ObservedPeak, readFirstOrder } from '../pattern/readFirstOrder.js';
import type { Spectrum } from '../spectrum/spectrum.js';

/** A maximum counts from this many noises, and from this share of the tallest one. */
const overNoise = 10;
const overTallest = 0.002;
/** Peaks further apart do not belong to one multiplet of protons; trans couplings reach 18 Hz. */
const groupHz = 19;
const peaksMax = 4000;
/** Peaks between two multiplets and their ends: this many widths are summed beyond the outermost ones. */
const marginWidths = 5;

interface Peak extends ObservedPeak {
  readonly index: number;
  readonly widthHz: number;
}

/**
 * Picks the multiplets of a spectrum for a proposal: groups of maxima with their summed area and the pattern read off them. It is
 * no measurement; `measure` is.
 *
 * @param spectrum  phased, flat, referenced
 * @returns by descending shift; pattern `m` where none is read
 */
export function pickMultiplets(spectrum: Spectrum): FoundMultiplet[] {
  const peaks = findMaxima(spectrum);
  const groups: Peak[][] = [];
  for (const peak of peaks) {
    const last = groups.at(-1);
    if (last !== undefined && last.at(-1)!.hz - peak.hz < groupHz) last.push(peak);
    else groups.push([peak]);
  }
  const strongest = [...peaks].sort((a, b) => b.height - a.height).slice(0, 12);
  const widths = strongest.map(({ widthHz }) => widthHz).sort((a, b) => a - b);
  const widthHz = widths[Math.floor(widths.length / 2)] ?? 1;
  return groups.map((group, index) => {
    const read = readFirstOrder(group, widthHz);
    const area = sum(spectrum, group, groups[index - 1]?.at(-1), groups[index + 1]?.[0], widthHz);
    const middle =
      group.reduce((total, { hz, height }) => total + hz * height, 0) / group.reduce((total, { height }) => total + height, 0);
    const couplingsHz = read?.pattern.splittings.flatMap(({ couplingHz }) => couplingHz ?? []);
    return {
      shiftPpm: (read?.centreHz ?? middle) / spectrum.observeMhz,
      area,
      pattern: read?.pattern.text ?? 'm',
      ...(couplingsHz !== undefined && couplingsHz.length > 0 ? { couplingsHz } : {}),
    };
  });
}

function findMaxima({ real, noise, firstPpm, observeMhz, stepHz }: Spectrum): Peak[] {
  const tallest = real.reduce((most, value) => Math.max(most, value), 0);
  const least = Math.max(overNoise * noise, overTallest * tallest);
  const peaks: Peak[] = [];
  for (let index = 1; index + 1 < real.length && peaks.length < peaksMax; index++) {
    const [before, here, after] = [real[index - 1]!, real[index]!, real[index + 1]!];
    if (here < least || here <= before || here < after || !isProminent(real, index, noise)) continue;
    const vertex = (0.5 * (before - after)) / (before - 2 * here + after);
    const hz = firstPpm * observeMhz - (index + vertex) * stepHz;
    peaks.push({ index, hz, height: here, widthHz: halfWidthPoints(real, index) * stepHz });
  }
  return peaks;
}

/** Noise on a flank makes maxima too: a peak falls by a tenth of its height and some noise on either side before it rises above. */
function isProminent(real: Float64Array, index: number, noise: number): boolean {
  const drop = 0.1 * real[index]! + 4 * noise;
  return [-1, 1].every((side) => {
    let lowest = real[index]!;
    for (let at = index + side; at >= 0 && at < real.length; at += side) {
      if (real[at]! > real[index]!) return false;
      lowest = Math.min(lowest, real[at]!);
      if (real[index]! - lowest >= drop) return true;
    }
    return true;
  });
}

function halfWidthPoints(real: Float64Array, index: number): number {
  const half = real[index]! / 2;
  let [low, high] = [index, index];
  while (low > 0 && real[low]! > half) low--;
  while (high + 1 < real.length && real[high]! > half) high++;
  return Math.max(1, high - low - 1);
}

function sum(
  spectrum: Spectrum,
  group: readonly Peak[],
  before: Peak | undefined,
  after: Peak | undefined,
  widthHz: number,
): number {
  const margin = Math.ceil((marginWidths * widthHz) / spectrum.stepHz);
  const [first, last] = [group[0]!.index, group.at(-1)!.index];
  const low = Math.max(0, first - margin, before === undefined ? 0 : Math.ceil((before.index + first) / 2));
  const high = Math.min(
    spectrum.real.length - 1,
    last + margin,
    after === undefined ? Number.MAX_SAFE_INTEGER : Math.floor((after.index + last) / 2),
  );
  let area = 0;
  for (let index = low; index <= high; index++) area += spectrum.real[index]!;
  return area * spectrum.stepHz;
}
