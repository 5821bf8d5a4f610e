import type { BackgroundSignal } from '../method/collisions.js';
import { trinomialLines } from '../pattern/trinomialLines.js';
import { residualSignals } from '../spectrum/residualSignals.js';

/**
 * What the tube shows beside the species in a proton spectrum: residual solvent and water.
 *
 * @param nucleus  of the method
 * @param solvent  usual name
 * @returns named signals with their lines; none for another nucleus or an unknown solvent
 * @source  see `residualSignals`
 */
export function tubeBackground(nucleus: string, solvent: string | undefined): BackgroundSignal[] {
  const known =
    nucleus === '1H' && solvent !== undefined && Object.hasOwn(residualSignals, solvent) ? residualSignals[solvent] : undefined;
  if (known === undefined) return [];
  const residual = known.signals.map(({ shiftPpm, deuterons, couplingHz }) => ({
    name: `residual ${solvent}`,
    shiftPpm,
    lines: deuterons > 0 ? trinomialLines(deuterons, couplingHz) : [{ offsetHz: 0, share: 1 }],
  }));
  const isApart = known.waterPpm !== undefined && !known.signals.some(({ shiftPpm }) => shiftPpm === known.waterPpm);
  return isApart ? [...residual, { name: 'water', shiftPpm: known.waterPpm!, lines: [{ offsetHz: 0, share: 1 }] }] : residual;
}
