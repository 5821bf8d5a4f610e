import type { Quantity } from '../base/quantity.js';
import type { Method } from '../method/method.js';
import { shareOf } from './shareOf.js';

/**
 * Purity by the 100 % method: the share of the method's species among all that was measured, reference and solvents aside.
 *
 * @param relative area per nucleus by species id
 * @returns mole fraction, and mass fraction when every molar mass is known; undefined without a `purity` block
 * @source Malz, Jancke, J. Pharm. Biomed. Anal. 2005, 38, 813 (from memory)
 */
export function normalisedPurity(
  method: Method,
  relative: ReadonlyMap<string, Quantity>,
): { moleFraction: Quantity; massFraction?: Quantity } | undefined {
  if (!method.purity) return undefined;
  const counted = method.species.filter(({ id, role }) => role !== 'solvent' && role !== 'internal-standard' && relative.has(id));
  const terms = counted.map(({ id }) => ({ ...relative.get(id)!, counted: id === method.purity!.of }));
  const moleFraction = shareOf(terms);
  if (!moleFraction) return undefined;
  if (counted.some(({ molarMass }) => molarMass === undefined)) return { moleFraction };
  const massFraction = shareOf(
    terms.map((term, index) => ({
      ...term,
      value: term.value * counted[index]!.molarMass!,
      u: term.u * counted[index]!.molarMass!,
    })),
  );
  return { moleFraction, ...(massFraction ? { massFraction } : {}) };
}
