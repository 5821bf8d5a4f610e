import type { Flag } from '../base/flag.js';
import { tolerated } from './jcampProblem.js';

/** Resonance of the proton, MHz per tesla (CODATA, rounded; from memory). */
const protonMhzPerTesla = 42.577;
/** Frequency ratios to the proton in per cent (IUPAC 2001 recommendations, Harris et al., Pure Appl. Chem. 73, 1795; from memory). */
const ratioPercent: ReadonlyMap<string, number> = new Map([
  ['1H', 100],
  ['2H', 15.350609],
  ['11B', 32.083974],
  ['13C', 25.14502],
  ['15N', 10.136767],
  ['19F', 94.094011],
  ['29Si', 19.867187],
  ['31P', 40.480742],
]);
/** Fields are often printed with three digits. */
const toleranceRelative = 0.02;

/**
 * Holds the observe frequency against the field and the nucleus, where the header states all three: a damaged digit of the
 * frequency moves every shift.
 */
export function checkField(nucleus: string | undefined, observeMhz: number | undefined, fieldT: number | undefined): Flag[] {
  const ratio = ratioPercent.get(nucleus ?? '');
  if (ratio === undefined || observeMhz === undefined || fieldT === undefined || fieldT <= 0) return [];
  const expectedMhz = (fieldT * protonMhzPerTesla * ratio) / 100;
  if (Math.abs(observeMhz / expectedMhz - 1) <= toleranceRelative) return [];
  const text = `.OBSERVE FREQUENCY is ${observeMhz} MHz, but ${nucleus} in a .FIELD of ${fieldT} T resonates near ${expectedMhz.toFixed(1)} MHz`;
  return [tolerated('jcamp-field', text)];
}
