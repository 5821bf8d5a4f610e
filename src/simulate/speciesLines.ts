import { expectedLines } from '../method/expectedLines.js';
import type { Method } from '../method/method.js';
import type { FidLine } from './synthesizeFid.js';

/** Natural abundance of 13C: each C-H signal has two satellites of half this share. Source: IUPAC 2013, 1.07 % (rounded). */
const carbon13Share = 0.0107;

export interface LineSettings {
  readonly observeMhz: number;
  /** Full width at half height of every line, Hz. */
  readonly widthHz: number;
  /** Moves every shift, ppm (a drifting temperature or lock). */
  readonly driftPpm?: number;
  /** Draw 13C satellites at +-J/2 around each line; 0 or absent: none. */
  readonly carbonCouplingHz?: number;
  /** Extra width of broad signals, Hz. */
  readonly broadHz?: number;
}

/**
 * The lines that the species of a method show at given amounts: the truth behind a simulated time point.
 *
 * @param amounts moles by species id, relative units; species not named show nothing
 * @returns lines whose area is amount x nuclei x share
 * @source the method's own patterns (`expectedLines`); satellites: common practice, 0.54 % a side
 */
export function speciesLines(method: Method, amounts: Readonly<Record<string, number>>, settings: LineSettings): FidLine[] {
  const lines: FidLine[] = [];
  for (const species of method.species) {
    const amount = amounts[species.id] ?? 0;
    if (amount === 0) continue;
    const patterns = expectedLines(species, settings.observeMhz);
    for (const signal of species.signals) {
      const widthHz = settings.widthHz + (signal.pattern.isBroad ? (settings.broadHz ?? 20) : 0);
      for (const { offsetHz, share } of patterns.get(signal.id) ?? [{ offsetHz: 0, share: 1 }]) {
        const shiftPpm = signal.shiftPpm + offsetHz / settings.observeMhz + (settings.driftPpm ?? 0);
        lines.push(...withSatellites({ shiftPpm, area: amount * signal.nuclei * share, widthHz }, settings));
      }
    }
  }
  return lines;
}

/** Splits a line into its 12C centre and two 13C satellites; total area is kept. */
export function withSatellites(line: FidLine, settings: Pick<LineSettings, 'observeMhz' | 'carbonCouplingHz'>): FidLine[] {
  const couplingHz = settings.carbonCouplingHz ?? 0;
  if (couplingHz === 0) return [line];
  const halfPpm = couplingHz / 2 / settings.observeMhz;
  const side = (line.area * carbon13Share) / 2;
  return [
    { ...line, area: line.area * (1 - carbon13Share) },
    { ...line, area: side, shiftPpm: line.shiftPpm + halfPpm },
    { ...line, area: side, shiftPpm: line.shiftPpm - halfPpm },
  ];
}
