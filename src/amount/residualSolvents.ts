import type { Quantity } from '../base/quantity.js';
import { solventLimits } from '../method/data/ichQ3c.js';
import type { Method } from '../method/method.js';
import type { SolventFinding } from '../signal/measured.js';
import type { ResidualSolvent } from './amounts.js';
import type { Scale } from './standardScale.js';

const z95 = 1.96;

/**
 * Residual solvents in ppm by mass against their limits.
 *
 * @param findings areas per nucleus of the solvents
 * @param relative area per nucleus by species id
 * @param scale    with masses: per mass of sample; else per mass of the species named by `of`
 * @returns `below`, `above` or `near` (limit inside the 95 % interval) for what was found, `not-detected` with the detectable amount
 * @source contract section 6; limits: ICH Q3C option 1; detection: 3.3 u0 (ICH Q2)
 */
export function residualSolvents(
  findings: readonly SolventFinding[],
  method: Method,
  relative: ReadonlyMap<string, Quantity>,
  scale: Scale,
): readonly ResidualSolvent[] | undefined {
  if (!method.residualSolvents) return undefined;
  const basis = basisOf(method, relative, scale);
  if (!basis) return undefined;
  return findings.flatMap((finding): ResidualSolvent[] => {
    const limit = solventLimits.find(([, cas]) => cas === finding.cas);
    if (!limit || !(finding.u0 > 0)) return [];
    const [name, cas, solventClass, limitPpm, molarMass] = limit;
    const perArea = molarMass * basis.perArea;
    const head = { name, cas, limitPpm, class: solventClass };
    if (finding.evidence !== 'found')
      return [{ ...head, verdict: 'not-detected' as const, detectablePpm: 3.3 * finding.u0 * perArea }];
    const ppm = finding.areaPerNucleus * perArea;
    const u = Math.hypot(finding.u * perArea, ppm * basis.relativeU);
    const verdict = ppm + z95 * u < limitPpm ? 'below' : ppm - z95 * u > limitPpm ? 'above' : 'near';
    return [{ ...head, ppm, u, verdict }];
  });
}

/** ppm by mass for one unit of area per nucleus and g/mol. */
function basisOf(
  method: Method,
  relative: ReadonlyMap<string, Quantity>,
  scale: Scale,
): { perArea: number; relativeU: number } | undefined {
  // mmol/g x g/mol = mg/g; a thousand ppm each.
  if (scale.unit === 'mmol/g') return { perArea: scale.factor * 1000, relativeU: scale.relativeU };
  const of = method.species.find(({ id }) => id === method.residualSolvents?.of);
  const area = of ? relative.get(of.id) : undefined;
  if (!of?.molarMass || !area || !(area.value > 5 * area.u)) return undefined;
  return { perArea: 1e6 / (area.value * of.molarMass), relativeU: area.u / area.value };
}
