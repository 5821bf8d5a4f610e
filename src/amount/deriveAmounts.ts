import type { Quantity } from '../base/quantity.js';
import type { Method, RunFile } from '../method/method.js';
import type { MeasuredSignal, Measurement } from '../signal/measured.js';
import type { Amounts, SpeciesAmount } from './amounts.js';
import { type CombinedSignals, combineSignals } from './combineSignals.js';
import { conversionOf } from './conversionOf.js';
import { massBalanceOf } from './massBalanceOf.js';
import { normalisedPurity } from './normalisedPurity.js';
import { purityOf } from './purityOf.js';
import { residualSolvents } from './residualSolvents.js';
import { saturationOf } from './saturationOf.js';
import { shareOf } from './shareOf.js';
import { standardScale } from './standardScale.js';
import { unassignedShareOf } from './unassignedShareOf.js';

/** Moles of the followed starting material at time zero, on the scale of `unit`; from the first points or the standard. */
export interface StartAmounts {
  readonly unit: Amounts['unit'];
  readonly amount: Quantity;
}

const fractionRoles = ['starting-material', 'intermediate', 'product', 'by-product', 'impurity'] as const;

/**
 * From areas to amounts: the table of contents of a time point's numbers.
 *
 * @param measurement areas of the time point
 * @param method      species, roles, stoichiometry, conversion
 * @param runFile     masses of the batch, when given
 * @param start       amount of the starting material at time zero, for the yield
 * @returns amounts on one scale (mmol/g, mol/L or relative), mole fractions, conversion, yield, with standard uncertainties
 * @source  contract section 6, Definitions; uncertainty by JCGM 100:2008
 */
export function deriveAmounts(measurement: Measurement, method: Method, runFile: RunFile, start?: StartAmounts): Amounts {
  const combined = combineAll(measurement, method);
  const relative = new Map([...combined].map(([id, { areaPerNucleus, u }]) => [id, { value: areaPerNucleus, u }]));
  const standard = method.species.find(({ role }) => role === 'internal-standard');
  const scale = standardScale(method, runFile, standard ? relative.get(standard.id) : undefined);
  const species: Record<string, SpeciesAmount> = {};
  for (const [id, { areaPerNucleus, u, u0, agreement }] of combined) {
    const amount = areaPerNucleus * scale.factor;
    const amountU = Math.hypot(u * scale.factor, amount * scale.relativeU);
    const fraction = moleFractionOf(id, method, relative);
    const detection = 3.3 * u0 * scale.factor;
    const quantitation = 10 * u0 * scale.factor;
    const below = amount < detection ? 'detection' : amount < quantitation ? 'quantitation' : undefined;
    species[id] = {
      amount,
      u: amountU,
      ...(fraction ? { moleFraction: fraction.value, moleFractionU: fraction.u } : {}),
      detection,
      quantitation,
      ...(below ? { below } : {}),
      ...(agreement !== undefined ? { agreement } : {}),
    };
  }
  const conversion = conversionOf(method, relative);
  const yielded = yieldOf(method, species, scale.unit, start);
  const balance = massBalanceOf(method, species, scale.unit, start);
  const purity = purityOf(method, runFile, relative);
  const solvents = residualSolvents(measurement.solvents, method, relative, scale);
  const normalised = normalisedPurity(method, relative);
  const unassigned = unassignedShareOf(measurement, method);
  return {
    unit: scale.unit,
    species,
    ...(conversion ? { conversion } : {}),
    ...(yielded ? { yield: yielded } : {}),
    ...(purity.budget ? { purity: purity.budget } : {}),
    ...(normalised ? { purityByNormalisation: normalised } : {}),
    ...(solvents ? { residualSolvents: solvents } : {}),
    ...(balance ? { massBalance: balance } : {}),
    ...(unassigned ? { unassignedShare: unassigned } : {}),
    flags: purity.flags,
  };
}

/**
 * Areas corrected for incomplete relaxation where the method gives relaxation delay, pulse angle and the signal's T1; without
 * them full relaxation is assumed, and the report says so.
 */
function relaxed(signals: readonly MeasuredSignal[], method: Method): readonly MeasuredSignal[] {
  const { relaxationDelayS, pulseAngleDeg } = method.acquisition;
  if (relaxationDelayS === undefined || pulseAngleDeg === undefined) return signals;
  return signals.map((signal) => {
    const t1S = method.species.flatMap((species) => species.signals).find(({ key }) => key === signal.key)?.t1S;
    if (t1S === undefined) return signal;
    const share = saturationOf(relaxationDelayS, t1S, pulseAngleDeg);
    return { ...signal, area: signal.area / share, u: signal.u / share, u0: signal.u0 / share };
  });
}

function combineAll(measurement: Measurement, method: Method): Map<string, CombinedSignals> {
  const combined = new Map<string, CombinedSignals>();
  for (const species of method.species) {
    const result = combineSignals(species, relaxed(measurement.signals, method));
    if (result) combined.set(species.id, result);
  }
  return combined;
}

function moleFractionOf(id: string, method: Method, relative: ReadonlyMap<string, Quantity>): Quantity | undefined {
  const counted = method.species.filter(({ role }) => (fractionRoles as readonly string[]).includes(role));
  if (!counted.some((species) => species.id === id)) return undefined;
  const terms = counted.flatMap((species) => {
    const amount = relative.get(species.id);
    return amount ? [{ ...amount, counted: species.id === id }] : [];
  });
  return shareOf(terms);
}

function yieldOf(
  method: Method,
  species: Readonly<Record<string, SpeciesAmount>>,
  unit: Amounts['unit'],
  start: StartAmounts | undefined,
): Quantity | undefined {
  const product = method.species.find(({ id, role }) =>
    method.conversion?.to !== undefined ? id === method.conversion.to : role === 'product',
  );
  const amount = product ? species[product.id] : undefined;
  if (!product || !amount || !start || start.unit !== unit || !(start.amount.value > 0)) return undefined;
  const value = amount.amount / product.stoichiometry / start.amount.value;
  const relativeU = Math.hypot(amount.amount !== 0 ? amount.u / amount.amount : 0, start.amount.u / start.amount.value);
  return { value, u: Math.abs(value) * relativeU || amount.u / product.stoichiometry / start.amount.value };
}
