import { nearestWord } from './nearestWord.js';

/** Deuterated solvents with published shift tables, and the names chemists write for them (common practice). */
const solventNames: Readonly<Record<string, readonly string[]>> = {
  CDCl3: ['chloroform-d', 'chloroform', 'deuterochloroform', 'chloroform-d1'],
  CD2Cl2: ['dichloromethane-d2', 'methylene chloride-d2', 'dcm-d2'],
  'DMSO-d6': ['dmso', '(cd3)2so', 'dimethyl sulfoxide-d6'],
  'acetone-d6': ['acetone', '(cd3)2co'],
  CD3CN: ['acetonitrile-d3', 'acetonitrile'],
  CD3OD: ['methanol-d4', 'methanol', 'meod'],
  D2O: ['deuterium oxide', 'heavy water', 'water-d2'],
  C6D6: ['benzene-d6', 'benzene'],
  'toluene-d8': ['toluene'],
  'THF-d8': ['thf', 'tetrahydrofuran-d8'],
  TFE: ['tfe-d3', '2,2,2-trifluoroethanol-d3'],
  C6D5Cl: ['chlorobenzene-d5'],
};

/** The usual name of a deuterated solvent, whatever form it was written in; undefined when it is not known. */
export function solventName(written: string): string | undefined {
  const plain = written.trim().toLowerCase();
  return Object.entries(solventNames).find(([name, others]) => name.toLowerCase() === plain || others.includes(plain))?.[0];
}

export function knownSolvents(): string[] {
  return Object.keys(solventNames);
}

export function nearestSolvent(written: string): string | undefined {
  const forms = Object.entries(solventNames).flatMap(([name, others]) => [name, ...others]);
  const nearest = nearestWord(written, forms);
  return nearest !== undefined ? solventName(nearest) : undefined;
}
