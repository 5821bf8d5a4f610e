import type { Peak } from './findPeaks.js';

/** Neighbouring lines that are fitted together, and those beside them whose tails reach in. */
export interface PeakGroup {
  readonly members: readonly Peak[];
  readonly guests: readonly Peak[];
  /** Farther lines with the strongest tails here. */
  readonly far: readonly Peak[];
  /** First and last point of the fit. */
  readonly from: number;
  readonly to: number;
}

const membersMax = 8;
const guestsMax = 3;
/** The fit reaches this many widths beyond the outermost member. */
const marginWidths = 5;

/**
 * Divides peaks into groups of neighbours.
 *
 * @param peaks      any order
 * @param pointCount n of the spectrum
 * @returns groups by rising index; a chain of more than eight lines is cut into several, each with the next ones as guests
 */
export function groupPeaks(peaks: readonly Peak[], pointCount: number): PeakGroup[] {
  const byPlace = [...peaks].sort((a, b) => a.index - b.index);
  const chains: Peak[][] = [];
  for (const peak of byPlace) {
    const chain = chains.at(-1);
    const last = chain?.at(-1);
    const near = last && peak.index - last.index < 7 * Math.max(peak.widthPoints, last.widthPoints);
    if (chain && near && chain.length < membersMax) chain.push(peak);
    else chains.push([peak]);
  }
  return chains.map((members) => withGuests(members, byPlace, pointCount));
}

function withGuests(members: readonly Peak[], all: readonly Peak[], pointCount: number): PeakGroup {
  const widest = Math.max(...members.map(({ widthPoints }) => widthPoints));
  const from = Math.max(0, Math.floor(members[0]!.index - marginWidths * widest));
  const to = Math.min(pointCount - 1, Math.ceil(members.at(-1)!.index + marginWidths * widest));
  const centre = (from + to) / 2;
  const others = all.filter((peak) => !members.includes(peak));
  const isNear = ({ index }: Peak) => index > from - 2 * widest && index < to + 2 * widest;
  const tailOf = ({ index, magnitude, widthPoints }: Peak) =>
    (magnitude * widthPoints) / Math.max(1, Math.abs(index - centre)) ** 2;
  const strongest = (peaks: Peak[]) => peaks.sort((a, b) => tailOf(b) - tailOf(a)).slice(0, guestsMax);
  return { members, guests: strongest(others.filter(isNear)), far: strongest(others.filter((peak) => !isNear(peak))), from, to };
}
