import type { Flag } from '../base/flag.js';
import { carbon13Share, usualOneBondHz } from '../pattern/carbonSatellites.js';
import { expectedLines } from './expectedLines.js';
import type { Method } from './method.js';

/** Usual couplings are known to about 10 Hz, so a satellite to half of that. */
const uncertainHz = 5;
/** Fainter lines of a pattern have satellites that no one sees. */
const strongShare = 0.03;

/**
 * Signals to be quantified that lie where a 13C satellite of another species falls: of little weight between equals, of much
 * when a trace lies beside a main component.
 *
 * @param method      as read; other nuclei than 1H have no remarks
 * @param observeMhz  MHz
 * @returns remarks (weight `note`)
 * @source  natural abundance of 13C and usual one-bond couplings (common practice)
 */
export function satelliteRemarks(method: Method, observeMhz: number): Flag[] {
  if (method.nucleus !== '1H') return [];
  const placed = method.species.flatMap((species) => {
    const lines = expectedLines(species, observeMhz);
    return species.signals.flatMap(({ id, key, use, shiftPpm, pattern }) => {
      const strong = (lines.get(id) ?? []).filter(({ share }) => share > strongShare).map(({ offsetHz }) => offsetHz);
      if (strong.length === 0 || pattern.isBroad) return [];
      const centre = shiftPpm * observeMhz;
      return [{ key, use, shiftPpm, species: species.id, low: centre + Math.min(...strong), high: centre + Math.max(...strong) }];
    });
  });
  const percent = Math.round(50_000 * carbon13Share) / 1000;
  return placed.flatMap((one): Flag[] => {
    if (one.use !== 'quantify') return [];
    const causes = placed.filter((other) => {
      const half = usualOneBondHz(other.shiftPpm) / 2;
      const isUnder = [half, -half].some(
        (move) => one.low < other.high + move + uncertainHz && other.low + move - uncertainHz < one.high,
      );
      return other.species !== one.species && isUnder;
    });
    if (causes.length === 0) return [];
    const names = causes.map(({ key }) => key).join(', ');
    const message = `at ${observeMhz} MHz a 13C satellite of ${names} falls on or beside it, up to ${percent} % of ${causes.length === 1 ? 'that signal' : 'each'}`;
    return [{ code: 'satellite-near', message, signal: one.key, weight: 'note' }];
  });
}
