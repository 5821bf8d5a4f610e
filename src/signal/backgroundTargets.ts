import type { Method, MethodSignal, MethodSpecies } from '../method/method.js';
import { referenceSubstances } from '../method/referenceSubstances.js';
import type { Pattern } from '../pattern/pattern.js';
import { trinomialLines } from '../pattern/trinomialLines.js';
import { residualSignals } from '../spectrum/residualSignals.js';
import type { Target } from './signalTargets.js';

/** Keys of signals that the method does not name but every sample shows begin with this. */
export const backgroundPrefix = '(background) ';

const singlet: Pattern = { text: 's', splittings: [], isBroad: false, isMultiplet: false };
const withinPpm = 0.05;
/** Water moves with temperature, acid and concentration (common practice). */
const waterWithinPpm = 0.12;
const takenPpm = 0.025;

/**
 * The signals that every sample shows though no species lists them: the reference substance, what is left of the deuterated
 * solvent, water. They are fitted so that their tails do not lie under others and so that they are not called impurities.
 *
 * @returns none for places that a declared signal already takes
 * @source  residual signals: see `residualSignals`; reference substances: see `referenceSubstances`
 */
export function backgroundTargets(method: Method, observeMhz: number): Target[] {
  const targets: Target[] = [];
  const reference = referenceSubstances[method.reference.signal];
  const declared = method.species.flatMap((species) => species.signals);
  const add = (name: string, shiftPpm: number, pattern: Pattern, reach: number, deuterons = 0, couplingHz = 0) => {
    const isTaken = declared.some((signal) => Math.abs(signal.shiftPpm - shiftPpm) < takenPpm && !signal.pattern.isMultiplet);
    if (!isTaken) targets.push(targetOf(name, shiftPpm, pattern, reach, deuterons, couplingHz));
  };
  if (reference !== undefined && reference.nucleus === method.nucleus) {
    add('reference', method.reference.shiftPpm ?? reference.shiftPpm, singlet, withinPpm);
  }
  const solvent = method.nucleus === '1H' && method.solvent !== undefined ? residualSignals[method.solvent] : undefined;
  for (const { shiftPpm, deuterons, couplingHz } of solvent?.signals ?? []) {
    // Room for a shift that concentration or the reference moves.
    add(`solvent ${shiftPpm}`, shiftPpm, singlet, method.solvent === 'D2O' ? waterWithinPpm : withinPpm, deuterons, couplingHz);
  }
  const water = solvent?.waterPpm;
  if (water !== undefined && method.solvent !== 'D2O') add('water', water, singlet, waterWithinPpm);
  return targets.filter((target) => Math.abs(target.signal.shiftPpm * observeMhz) < Number.POSITIVE_INFINITY);
}

function targetOf(
  name: string,
  shiftPpm: number,
  pattern: Pattern,
  reach: number,
  deuterons: number,
  couplingHz: number,
): Target {
  const key = `${backgroundPrefix}${name}`;
  const signal: MethodSignal = {
    id: name,
    key,
    shiftPpm,
    withinPpm: reach,
    pattern,
    nuclei: 1,
    use: 'ignore',
    moves: false,
  };
  const species: MethodSpecies = { id: backgroundPrefix, name, role: 'solvent', stoichiometry: 1, signals: [signal] };
  const lines = (deuterons > 0 ? trinomialLines(deuterons, couplingHz) : [{ offsetHz: 0, share: 1 }]).map((line) => ({
    ...line,
    perCoupling: [],
  }));
  return { key, species, signal, lines, spanHz: [lines.at(-1)!.offsetHz, lines[0]!.offsetHz], couplingsHz: [] };
}
