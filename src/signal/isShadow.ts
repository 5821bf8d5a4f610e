import type { Peak } from './pickPeaks.js';

/** One-bond couplings to 13C: of protons and of fluorine (common practice). */
const couplingRangeHz: Readonly<Record<string, readonly [number, number]>> = { '1H': [110, 225], '19F': [220, 300] };
/** Each satellite holds 0.54 % of the line (13C at natural abundance, 1.07 %). */
const satelliteShare = 0.0054;
const sideBandShareMax = 0.03;
const sideBandHz: readonly [number, number] = [8, 60];
/** The line of the 13C compound lies up to some hertz beside the middle of its satellites (isotope shift). */
const mirrorHz = 2.5;

/**
 * Whether a peak is the shadow of a strong line: a 13C satellite of the right share and distance with its mirror image on the
 * other side, or one of a pair of spinning side bands.
 *
 * @param peaks  all peaks that could be the mirror image, faint ones as well
 * @param lines  strong lines
 * @param isBlind whether a mirror image at this place could not be seen
 * @returns false when no line explains it
 * @source  natural abundance: IUPAC 2013; mirror-image check: common practice
 */
export function isShadow(
  peak: Peak,
  peaks: readonly Peak[],
  lines: readonly Peak[],
  nucleus: string,
  isBlind: (shiftHz: number) => boolean,
): boolean {
  const [low, high] = couplingRangeHz[nucleus] ?? [0, 0];
  return lines.some((line) => {
    const away = peak.shiftHz - line.shiftHz;
    const share = peak.area / line.area;
    const isSatellite =
      2 * Math.abs(away) > low && 2 * Math.abs(away) < high && share > 0.4 * satelliteShare && share < 2 * satelliteShare;
    const isSideBand = Math.abs(away) > sideBandHz[0] && Math.abs(away) < sideBandHz[1] && share < sideBandShareMax;
    if (!isSatellite && !isSideBand) return false;
    const mirror = line.shiftHz - away;
    const hasMirror = peaks.some(
      (other) => Math.abs(other.shiftHz - mirror) < mirrorHz && other.area > 0.35 * peak.area && other.area < 2.8 * peak.area,
    );
    return hasMirror || (isSatellite && isBlind(mirror));
  });
}
