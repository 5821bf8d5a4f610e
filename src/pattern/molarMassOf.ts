import { fail, ok, type Result } from '../base/result.js';
import { atomicWeights, isotopeMasses } from './atomicWeights.js';
import type { MoleculeAtom } from './molecule.js';
import { patternProblem } from './patternProblem.js';
import { readMolecule } from './readMolecule.js';

/** Formula and molar mass of a structure. */
export interface MolarMass {
  /** Hill order: C, H, then the others by letter; deuterium as D, other isotopes as `[13C]`. */
  readonly formula: string;
  /** g/mol */
  readonly molarMass: number;
  /** g/mol, standard uncertainty from the ranges of the standard atomic weights. */
  readonly molarMassU: number;
}

/**
 * Formula and molar mass of a structure, with the uncertainty of the standard atomic weights.
 *
 * @param smiles  structure; all components count (`[Na+].CC([O-])=O` is sodium acetate)
 * @returns formula in Hill order, g/mol and its standard uncertainty: the atoms of one element share their error, elements are
 *          independent, each range is taken as rectangular
 * @errors  those of `readMolecule`; molar-mass-unknown for an element without a standard atomic weight here
 * @source  A. Possolo et al., Pure Appl. Chem. 90 (2018) 395-424 for the rectangular reading (from memory); checked against the
 *          molar masses and uncertainties of BIPM Rapports 2018/01 and 2018/04
 */
export function molarMassOf(smiles: string): Result<MolarMass> {
  const molecule = readMolecule(smiles);
  if (!molecule.ok) return molecule;
  const counts = new Map<string, number>();
  const add = (symbol: string, count: number) => counts.set(symbol, (counts.get(symbol) ?? 0) + count);
  for (const atom of molecule.value.atoms) {
    add(symbolOf(atom), 1);
    if (atom.hydrogens > 0) add('H', atom.hydrogens);
  }
  let molarMass = 0;
  let variance = 0;
  for (const [symbol, count] of counts) {
    const found = massOf(symbol);
    if (found === undefined) {
      const message = `the standard atomic weight of ${symbol} is not known to the program`;
      return fail(patternProblem('molar-mass-unknown', message, 'Give molar_mass in the method.'));
    }
    molarMass += count * found.weight;
    variance += (count * found.halfWidth) ** 2 / 3;
  }
  return ok({ formula: hill(counts), molarMass: Math.round(molarMass * 1e6) / 1e6, molarMassU: Math.sqrt(variance) });
}

function symbolOf({ element, massNumber }: MoleculeAtom): string {
  if (massNumber === 0) return element;
  return element === 'H' && massNumber === 2 ? 'D' : `[${massNumber}${element}]`;
}

function massOf(symbol: string) {
  if (Object.hasOwn(atomicWeights, symbol)) return atomicWeights[symbol];
  const isotope = isotopeMasses[symbol === 'D' ? '2H' : symbol.slice(1, -1)];
  return isotope === undefined ? undefined : { weight: isotope, halfWidth: 0 };
}

function hill(counts: ReadonlyMap<string, number>): string {
  const place = (symbol: string) => (counts.has('C') ? (symbol === 'C' ? 0 : symbol === 'H' ? 1 : 2) : 2);
  const bare = (symbol: string) => symbol.replace(/[[\]\d]/g, '');
  const symbols = [...counts.keys()].sort((a, b) => place(a) - place(b) || (bare(a) < bare(b) ? -1 : bare(a) > bare(b) ? 1 : 0));
  return symbols.map((symbol) => `${symbol}${counts.get(symbol) === 1 ? '' : counts.get(symbol)}`).join('');
}
