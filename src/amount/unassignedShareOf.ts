import type { Quantity } from '../base/quantity.js';
import type { Method } from '../method/method.js';
import type { Measurement } from '../signal/measured.js';

/**
 * Area that no species explains, as a share of all area of starting materials, intermediates, products and impurities (by nuclei).
 *
 * @returns 0 with its uncertainty left out when nothing is unassigned
 */
export function unassignedShareOf(measurement: Measurement, method: Method): Quantity | undefined {
  const counted = new Set(
    method.species
      .filter(({ role }) => ['starting-material', 'intermediate', 'product', 'by-product', 'impurity'].includes(role))
      .map(({ id }) => id),
  );
  const known = measurement.signals
    .filter(({ species }) => counted.has(species))
    .reduce((sum, { area }) => sum + Math.max(0, area), 0);
  if (!(known > 0)) return undefined;
  const area = measurement.unassigned.reduce((sum, line) => sum + line.area, 0);
  const u = Math.sqrt(measurement.unassigned.reduce((sum, line) => sum + line.u ** 2, 0));
  return { value: area / (known + area), u: u / (known + area) };
}
