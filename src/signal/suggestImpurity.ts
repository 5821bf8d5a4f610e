import { impurityShifts } from '../method/data/impurityShifts.js';

const reachPpm = 0.03;
/** Printed forms that leave the pattern open. */
const openForm = /m|br/;

/**
 * Names the common solvent or trace impurity that a signal may be, from the published shifts in the method's solvent.
 *
 * @param pattern letters found, e.g. `s`, `t`; `m` agrees with everything
 * @returns e.g. `toluene CH3`; undefined when nothing lies within 0.03 ppm with an agreeing pattern
 * @source  see `impurityShifts`
 */
export function suggestImpurity(shiftPpm: number, pattern: string, solvent: string | undefined): string | undefined {
  let best: { words: string; distance: number } | undefined;
  for (const [name, , group, multiplicity, , inSolvent, , publishedPpm] of impurityShifts) {
    if (inSolvent !== solvent) continue;
    const off = Math.abs(publishedPpm - shiftPpm);
    if (off > reachPpm) continue;
    const agrees = pattern === multiplicity;
    if (!agrees && pattern !== 'm' && !openForm.test(multiplicity)) continue;
    // An agreeing pattern is worth two hundredths of a ppm.
    const distance = off + (agrees ? 0 : 0.02);
    if (distance < (best?.distance ?? Number.POSITIVE_INFINITY)) best = { words: `${name} ${group}`.trim(), distance };
  }
  return best?.words;
}
