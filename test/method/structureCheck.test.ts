import { describe, expect, it } from 'vitest';
import { structureCheck } from '../../src/method/structureCheck.js';
import { type Entry, speciesOf } from './speciesOf.js';

function check(smiles: string, entries: Readonly<Record<string, Entry>>, facts: { molarMass?: number; nucleus?: string } = {}) {
  const { nucleus = '1H', ...rest } = facts;
  const report = structureCheck(speciesOf(entries, { id: 'ester', smiles, ...rest }), nucleus);
  if (!report.ok) throw new Error(report.problem.message);
  if (report.value === undefined) throw new Error('no report');
  return report.value;
}
const contradictions = (report: ReturnType<typeof check>) => report.flags.filter(({ weight }) => weight !== 'note');

describe('structureCheck', () => {
  it('explains a triplet where the structure has three neighbours', () => {
    const report = check('C(=O)OCC', { OCH2: '4.12 (t, J = 7.1 Hz, 2H)', CH3: '1.25 (t, J = 7.1 Hz, 3H)' });
    expect(contradictions(report)).toEqual([
      {
        code: 'structure-pattern',
        signal: 'ester/OCH2',
        message: 'the OCH2 of C(=O)OCC has three neighbours: a quartet is expected, the method lists a triplet',
      },
    ]);
    expect(report.matches[0]).toMatchObject({
      labels: ['OCH2'],
      expected: 'q',
      expectedNeighbours: 3,
      listedNeighbours: 2,
      agrees: false,
    });
  });

  // Listings: common practice for these compounds in CDCl3.
  it.each<readonly [string, string, Readonly<Record<string, Entry>>]>([
    ['chloroethane', 'CCCl', { a: '3.57 (q, J = 7.2 Hz, 2H)', b: '1.49 (t, J = 7.2 Hz, 3H)' }],
    [
      'methyl butanoate',
      'CCCC(=O)OC',
      { a: '3.67 (s, 3H)', b: '2.30 (t, J = 7.4 Hz, 2H)', c: '1.66 (sext, J = 7.4 Hz, 2H)', d: '0.95 (t, J = 7.4 Hz, 3H)' },
    ],
    [
      'heptan-4-one',
      'CCCC(=O)CCC',
      { a: '2.37 (t, J = 7.4 Hz, 4H)', b: '1.60 (sext, J = 7.4 Hz, 4H)', c: '0.91 (t, J = 7.4 Hz, 6H)' },
    ],
    ['propan-2-ol', 'CC(O)C', { a: '4.01 (sept, J = 6.1 Hz, 1H)', b: '2.1 (br s, 1H)', c: '1.20 (d, J = 6.1 Hz, 6H)' }],
    ['benzyl acetate', 'CC(=O)OCc1ccccc1', { OCH2: '5.11 (s, 2H)', acetyl: '2.10 (s, 3H)', Ar: '7.40-7.28 (m, 5H)' }],
    [
      'ethyl crotonate',
      'C/C=C/C(=O)OCC',
      {
        a: '6.97 (dq, J = 15.5, 6.9 Hz, 1H)',
        b: '5.84 (dq, J = 15.5, 1.7 Hz, 1H)',
        c: '4.18 (q, J = 7.1 Hz, 2H)',
        d: '1.88 (dd, J = 6.9, 1.7 Hz, 3H)',
        e: '1.28 (t, J = 7.1 Hz, 3H)',
      },
    ],
    [
      'ethyl vinyl ether',
      'CCOC=C',
      {
        a: '6.46 (dd, J = 14.4, 6.8 Hz, 1H)',
        b: '4.17 (dd, J = 14.4, 1.9 Hz, 1H)',
        c: '3.97 (dd, J = 6.8, 1.9 Hz, 1H)',
        d: '3.76 (q, J = 7.0 Hz, 2H)',
        e: '1.29 (t, J = 7.0 Hz, 3H)',
      },
    ],
    [
      '4-methoxybenzaldehyde',
      'COc1ccc(C=O)cc1',
      { a: '9.88 (s, 1H)', b: '7.84 (d, J = 8.8 Hz, 2H)', c: '7.00 (d, J = 8.8 Hz, 2H)', d: '3.89 (s, 3H)' },
    ],
    ['N,N-dimethylformamide, two methyl signals', 'CN(C)C=O', { a: '8.02 (s, 1H)', b: '2.96 (s, 3H)', c: '2.88 (s, 3H)' }],
    ['N,N-dimethylformamide, one signal of six', 'CN(C)C=O', { b: '2.92 (s, 6H)' }],
    ['isobutanol', 'CC(C)CO', { a: '3.40 (d, J = 6.5 Hz, 2H)', b: '1.77 (non, J = 6.6 Hz, 1H)', c: '0.92 (d, J = 6.7 Hz, 6H)' }],
    [
      'butanal',
      'CCCC=O',
      { a: '9.76 (t, J = 1.8 Hz, 1H)', b: '2.42 (td, J = 7.3, 1.8 Hz, 2H)', c: '1.67 (sext, J = 7.4 Hz, 2H)' },
    ],
    ['butanal with its small coupling unresolved', 'CCCC=O', { a: '9.76 (s, 1H)', b: '2.42 (t, J = 7.3 Hz, 2H)' }],
    [
      'phenyl listed in full',
      'CCOC(=O)c1ccccc1',
      { o: '8.05 (d, J = 7.7 Hz, 2H)', p: '7.55 (t, J = 7.4 Hz, 1H)', m: '7.44 (t, J = 7.6 Hz, 2H)' },
    ],
    ['4-fluorotoluene', 'Cc1ccc(F)cc1', { a: '7.13 (dd, J = 8.5, 5.6 Hz, 2H)', b: '6.96 (t, J = 8.8 Hz, 2H)' }],
    [
      'but-2-yn-1-ol, coupled through the triple bond',
      'CC#CCO',
      { a: '4.25 (q, J = 2.4 Hz, 2H)', b: '1.86 (t, J = 2.4 Hz, 3H)' },
    ],
    ['propargyl alcohol', 'C#CCO', { a: '4.28 (d, J = 2.5 Hz, 2H)', b: '2.48 (t, J = 2.5 Hz, 1H)' }],
    ['tert-butyl methyl ether', 'COC(C)(C)C', { a: '3.22 (s, 3H)', b: '1.19 (s, 9H)' }],
  ])('agrees with the usual listing of %s', (_, smiles, entries) => {
    const report = check(smiles, entries);
    expect(contradictions(report)).toEqual([]);
    expect(report.matches.every(({ agrees }) => agrees)).toBe(true);
  });

  it.each<readonly [string, string, Readonly<Record<string, Entry>>, string]>([
    ['a quartet for the methyl', 'CCOC(C)=O', { CH3: '1.25 (q, J = 7.1 Hz, 3H)' }, 'structure-pattern'],
    ['a singlet for a septet', 'CC(O)C', { CH: '4.01 (s, 1H)' }, 'structure-pattern'],
    ['a quintet for the sextet', 'CCCC(=O)OC', { CH2: '1.66 (quint, J = 7.4 Hz, 2H)' }, 'structure-pattern'],
    ['a doublet for an acetyl group', 'CCOC(C)=O', { acetyl: '2.04 (d, J = 7.0 Hz, 3H)' }, 'structure-pattern'],
    ['a septet with six neighbours doubled', 'CCCC(=O)CCC', { CH3: '0.91 (quint, J = 7.4 Hz, 6H)' }, 'structure-pattern'],
    ['three protons for a CH2', 'CCOC(C)=O', { OCH2: '4.12 (q, J = 7.1 Hz, 4H)' }, 'structure-count'],
    ['a proton of chloroform-d', '[2H]C(Cl)(Cl)Cl', { CH: '7.26 (s, 1H)' }, 'structure-count'],
  ])('contradicts %s', (_, smiles, entries, code) =>
    expect(contradictions(check(smiles, entries)).map((flag) => flag.code)).toEqual([code]),
  );

  it('is not fooled by two patterns that are exchanged', () => {
    const report = check('CCCC(=O)OC', {
      a: '2.30 (sext, J = 7.4 Hz, 2H)',
      b: '1.66 (t, J = 7.4 Hz, 2H)',
      d: '0.95 (t, J = 7.4 Hz, 3H)',
    });
    expect(contradictions(report).map(({ signal }) => signal)).toEqual(['ester/a', 'ester/b']);
  });

  it('tells groups of one count by their patterns where the shifts would mislead', () => {
    // The quartet is the OCH2 although its shift lies as near to the estimate of the other CH2.
    const report = check('CCOC(=O)CCC', { a: '3.15 (q, J = 7.1 Hz, 2H)', b: '3.05 (t, J = 7.4 Hz, 2H)' });
    expect(report.matches.map(({ labels }) => labels)).toEqual([['OCH2'], ['COCH2']]);
    const turned = check('CCOC(=O)CCC', { a: '3.05 (q, J = 7.1 Hz, 2H)', b: '3.15 (t, J = 7.4 Hz, 2H)' });
    expect(turned.matches.map(({ labels }) => labels)).toEqual([['OCH2'], ['COCH2']]);
  });

  it('remarks on patterns that need an exchangeable proton or a stereocentre, without contradicting them', () => {
    const coupledOh = check('OCC', { CH2: '3.44 (dq, J = 5.1, 7.0 Hz, 2H)' });
    expect(coupledOh.flags.map(({ code, weight }) => [code, weight])).toEqual([['structure-note', 'note']]);
    const uneven = check('CCC(O)C', {
      CH: '3.72 (sext, J = 6.2 Hz, 1H)',
      Ha: '1.50 (ddd, J = 14.0, 7.4, 6.2 Hz, 1H)',
      Hb: '1.40 (m, 1H)',
    });
    expect(contradictions(uneven)).toEqual([]);
  });

  it('lists the groups that the method leaves out', () => {
    const report = check('CCOC(C)=O', { OCH2: '4.12 (q, J = 7.1 Hz, 2H)' });
    expect(report.unlisted).toEqual([
      { label: 'CH3', nuclei: 3, expected: 't' },
      { label: 'COCH3', nuclei: 3, expected: 's' },
    ]);
  });

  it('compares the molar mass', () => {
    expect(contradictions(check('OCc1ccccc1', { CH2: '4.69 (s, 2H)' }, { molarMass: 108.14 }))).toEqual([]);
    const [flag] = contradictions(check('OCc1ccccc1', { CH2: '4.69 (s, 2H)' }, { molarMass: 106.12 }));
    expect(flag).toMatchObject({ code: 'structure-mass', message: expect.stringContaining('108.14') });
  });

  it('checks fluorine against fluorine', () => {
    expect(contradictions(check('FC(F)(F)c1ccc(Cl)cc1', { CF3: '-62.9 (s, 3F)' }, { nucleus: '19F' }))).toEqual([]);
    expect(contradictions(check('FC(F)(F)c1ccc(Cl)cc1', { CF3: '-62.9 (s, 2F)' }, { nucleus: '19F' }))).toHaveLength(1);
  });

  it('says nothing without a structure, and reports one that cannot be read', () => {
    expect(structureCheck(speciesOf({ a: '1.0 (s, 3H)' }), '1H')).toEqual({ ok: true, value: undefined });
    const broken = structureCheck(speciesOf({ a: '1.0 (s, 3H)' }, { smiles: 'C(C' }), '1H');
    expect(broken.ok ? 'read' : broken.problem.code).toBe('smiles-unreadable');
  });
});
