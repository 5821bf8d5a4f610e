import type { Flag } from '../base/flag.js';
import { carbon13Share, usualOneBondHz } from '../pattern/carbonSatellites.js';
import { expectedLines } from './expectedLines.js';
import type { Method } from './method.js';
import { extent } from './overlapShare.js';

/** Usual couplings are known to about 10 Hz, so a satellite to half of that. */
const uncertainHz = 5;

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
    return species.signals.flatMap((signal) => {
      const own = lines.get(signal.id) ?? [];
      if (own.length === 0 || signal.pattern.isBroad) return [];
      const [low, high] = extent({ centreHz: signal.shiftPpm * observeMhz, lines: own });
      return [{ signal, species: species.id, low, high }];
    });
  });
  const percent = Math.round(50_000 * carbon13Share) / 1000;
  return placed.flatMap((one) => {
    if (one.signal.use !== 'quantify') return [];
    return placed.flatMap((other): Flag[] => {
      const half = usualOneBondHz(other.signal.shiftPpm) / 2;
      const isUnder = [half, -half].some(
        (move) => one.low < other.high + move + uncertainHz && other.low + move - uncertainHz < one.high,
      );
      if (other.species === one.species || !isUnder) return [];
      const message = `at ${observeMhz} MHz a 13C satellite of ${other.signal.key} falls on or beside ${one.signal.key}: it adds up to ${percent} % of that signal`;
      return [{ code: 'satellite-near', message, signal: one.signal.key, weight: 'note' }];
    });
  });
}
