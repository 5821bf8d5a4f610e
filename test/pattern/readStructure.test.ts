import { describe, expect, it } from 'vitest';
import { expectedPattern, neighbourRange } from '../../src/pattern/expectedPattern.js';
import { neighboursImplied } from '../../src/pattern/neighboursImplied.js';
import { parsePattern } from '../../src/pattern/parsePattern.js';
import { readStructure } from '../../src/pattern/readStructure.js';

function groupsOf(smiles: string, element = 'H') {
  const read = readStructure(smiles, element);
  if (!read.ok) throw new Error(read.problem.message);
  return read.value.groups;
}
const summary = (smiles: string, element?: string) =>
  groupsOf(smiles, element)
    .map((group) => `${group.nuclei} ${expectedPattern(group)}`)
    .sort();

// Source of every expectation here: common practice (first-order spectra of textbook molecules).
describe('readStructure', () => {
  it.each([
    ['chloroethane', 'CCCl', ['2 q', '3 t']],
    ['methyl butanoate', 'CCCC(=O)OC', ['2 sext', '2 t', '3 s', '3 t']],
    ['heptan-4-one, where symmetry does not double the neighbours', 'CCCC(=O)CCC', ['4 sext', '4 t', '6 t']],
    ['propan-2-ol', 'CC(O)C', ['1 s', '1 sept', '6 d']],
    ['ethyl acetate', 'CCOC(C)=O', ['2 q', '3 s', '3 t']],
    ['isobutanol', 'CC(C)CO', ['1 non', '1 s', '2 d', '6 d']],
    ['tert-butyl methyl ether', 'COC(C)(C)C', ['3 s', '9 s']],
    ['1,2-dichloroethane, whose equivalent protons do not split', 'ClCCCl', ['4 s']],
    ['1,4-dioxane', 'C1COCCO1', ['8 s']],
    ['diethyl ether', 'CCOCC', ['4 q', '6 t']],
    ['acetaldehyde', 'CC=O', ['1 q', '3 d']],
    ['ethyl vinyl ether, whose =CH2 protons differ', 'CCOC=C', ['1 dd', '1 dd', '1 dd', '2 q', '3 t']],
    ['ethyl crotonate', 'C/C=C/C(=O)OCC', ['1 d', '1 dq', '2 q', '3 d', '3 t']],
    ['4-methoxybenzaldehyde', 'COc1ccc(C=O)cc1', ['1 s', '2 d', '2 d', '3 s']],
    ['benzyl alcohol', 'OCc1ccccc1', ['1 s', '1 t', '2 d', '2 s', '2 t']],
    ['N,N-dimethylformamide, hindered at nitrogen', 'CN(C)C=O', ['1 s', '3 s', '3 s']],
    ['3-methylbut-2-en-1-ol, cis and trans methyl', 'CC(C)=CCO', ['1 s', '1 t', '2 d', '3 s', '3 s']],
    ['1,4-dichlorobenzene', 'Clc1ccc(Cl)cc1', ['4 s']],
    ['naphthalene', 'c1ccc2ccccc2c1', ['4 d', '4 d']],
    ['fluoroethane, split by fluorine', 'CCF', ['2 dq', '3 dt']],
    ['4-fluorotoluene', 'Cc1ccc(F)cc1', ['2 dd', '2 t', '3 s']],
    ['acetic acid', 'CC(=O)O', ['1 s', '3 s']],
    ['chloroform-d', '[2H]C(Cl)(Cl)Cl', []],
    ['methanol with its hydrogens written out', '[H]OC([H])([H])[H]', ['1 s', '3 s']],
  ])('gives %s the groups of the n + 1 rule', (_, smiles, expected) => expect(summary(smiles)).toEqual([...expected].sort()));

  it('observes fluorine', () => {
    expect(groupsOf('FC(F)(F)c1ccc(Cl)cc1', 'F').map(({ label, nuclei }) => [label, nuclei])).toEqual([['CF3', 3]]);
    expect(summary('OCC(F)(F)F', 'F')).toEqual(['3 t']);
  });

  it('gives the same groups whichever way the structure is written', () => {
    for (const [a, b] of [
      ['CCCC(=O)OC', 'O(C)C(=O)CCC'],
      ['COc1ccc(C=O)cc1', 'O=Cc1ccc(OC)cc1'],
      ['CC(C)=CCO', 'OC\\C=C(/C)C'],
    ])
      expect(summary(a!)).toEqual(summary(b!));
  });

  it('marks exchangeable protons, and CH2 groups that a stereocentre makes uneven', () => {
    const butanol = groupsOf('CCC(O)C');
    expect(butanol.filter(({ isExchangeable }) => isExchangeable).map(({ label }) => label)).toEqual(['OH']);
    expect(butanol.filter(({ isDiastereotopic }) => isDiastereotopic).map(({ label }) => label)).toEqual(['CH2']);
    expect(groupsOf('CCCCO').some(({ isDiastereotopic }) => isDiastereotopic)).toBe(false);
    expect(groupsOf('CC(OCC)OCC').filter(({ isDiastereotopic }) => isDiastereotopic)).toHaveLength(1);
  });

  it('tells alike carbons apart that neighbour counting alone does not', () => {
    // Decalin and bicyclopentyl: every atom has alike neighbours, a known limit of refinement alone.
    const decalin = groupsOf('C1CCC2CCCCC2C1').length;
    const bicyclopentyl = groupsOf('C1CCCC1C1CCCC1').length;
    expect(decalin).toBe(3);
    expect(bicyclopentyl).toBe(3);
    expect(groupsOf('C1CCC2CCCCC2C1.C1CCCC1C1CCCC1').length).toBe(6);
  });

  it('counts neighbours that split for certain and those that may', () => {
    const alpha = groupsOf('C/C=C/C(=O)OCC').find((group) => expectedPattern(group) === 'd' && group.nuclei === 1)!;
    expect(neighbourRange(alpha.neighbours)).toEqual([1, 4]);
  });

  it('estimates shifts well enough to tell the groups of ethyl crotonate apart', () => {
    // Shifts: common practice (0.05 to 0.1 ppm between solvents); the estimate is good to about 0.6 ppm.
    const shifts = groupsOf('C/C=C/C(=O)OCC').map(({ estimatedShiftPpm }) => estimatedShiftPpm!);
    for (const [index, expected] of [1.88, 6.97, 5.84, 4.18, 1.28].entries())
      expect(Math.abs(shifts[index]! - expected)).toBeLessThan(0.6);
  });

  it('refuses what is not a structure', () => {
    const read = readStructure('C(C');
    expect(read.ok ? 'read' : read.problem.code).toBe('smiles-unreadable');
  });
});

describe('neighboursImplied', () => {
  it.each([
    ['s', 0],
    ['q', 3],
    ['dq', 4],
    ['sext', 5],
    ['m', undefined],
  ])('reads %s as %s neighbours', (text, neighbours) => {
    const parsed = parsePattern(text, []);
    expect(parsed.ok && neighboursImplied(parsed.value)).toBe(neighbours);
  });
});
