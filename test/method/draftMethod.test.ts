import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { checkMethod } from '../../src/method/checkReport.js';
import { type DraftSource, draftSpecies } from '../../src/method/draftMethod.js';
import { draftYaml } from '../../src/method/draftYaml.js';
import { listedFromMultiplets } from '../../src/method/listedFromMultiplets.js';
import { readMethod } from '../../src/method/readMethod.js';
import { uniqueIds } from '../../src/method/uniqueIds.js';
import { parseListed } from '../../src/pattern/parseListed.js';

function draft(sources: readonly DraftSource[], nucleus = '1H') {
  const species = draftSpecies(sources, nucleus);
  if (!species.ok) throw new Error(species.problem.message);
  const text = draftYaml({ title: 'A draft: "quoted" # not a comment', nucleus, madeFrom: ['a\ntest'] }, species.value);
  const method = readMethod(text, 'draft');
  if (!method.ok) throw new Error(`${method.problem.map(({ message }) => message).join('; ')}\n${text}`);
  const report = checkMethod(method.value, [60, 400]);
  return { text, method: method.value, contradictions: report.flags.filter(({ weight }) => weight !== 'note'), report };
}
const listed = (...entries: string[]) =>
  entries.map((entry) => {
    const parsed = parseListed(entry);
    if (!parsed.ok) throw new Error(parsed.problem.message);
    return parsed.value;
  });

describe('a draft passes check', () => {
  it.each([
    ['chloroethane', 'CCCl'],
    ['methyl butanoate', 'CCCC(=O)OC'],
    ['heptan-4-one', 'CCCC(=O)CCC'],
    ['propan-2-ol', 'CC(O)C'],
    ['ethyl crotonate', 'C/C=C/C(=O)OCC'],
    ['ethyl vinyl ether', 'CCOC=C'],
    ['4-methoxybenzaldehyde', 'COc1ccc(C=O)cc1'],
    ['benzyl acetate', 'CC(=O)OCc1ccccc1'],
    ['N,N-dimethylformamide', 'CN(C)C=O'],
    ['butan-2-ol', 'CCC(O)C'],
    ['cyclohexanol', 'OC1CCCCC1'],
    ['isobutanol', 'CC(C)CO'],
    ['4-fluorotoluene', 'Cc1ccc(F)cc1'],
    ['fluoroethane', 'CCF'],
    ['paracetamol', 'CC(=O)Nc1ccc(O)cc1'],
    ['maleic acid', 'OC(=O)/C=C\\C(O)=O'],
    ['naphthalene', 'c1ccc2ccccc2c1'],
    ['butanal', 'CCCC=O'],
  ])('from the structure of %s', (name, smiles) => {
    const { contradictions, method, report } = draft([{ name, smiles }]);
    expect(contradictions).toEqual([]);
    expect(report.problems).toEqual([]);
    expect(report.species[0]!.unlisted).toEqual([]);
    expect(method.species[0]!.signals.length).toBeGreaterThan(0);
  });

  it('from two structures: roles and conversion by order, every guess marked', () => {
    const { text, method } = draft([
      { name: 'benzyl alcohol', smiles: 'OCc1ccccc1' },
      { name: 'benzyl acetate', smiles: 'CC(=O)OCc1ccccc1' },
    ]);
    expect(method.species.map(({ id, role }) => [id, role])).toEqual([
      ['benzyl-alcohol', 'starting-material'],
      ['benzyl-acetate', 'product'],
    ]);
    expect(method.conversion).toMatchObject({ of: 'benzyl-alcohol', to: 'benzyl-acetate' });
    for (const line of text.split('\n').filter((one) => /listed|role|conversion/.test(one))) expect(line).toContain('# guess');
  });

  it('keeps listed signals as they stand and names them after the structure', () => {
    const { method } = draft([
      {
        name: 'ethyl acetate',
        smiles: 'CCOC(C)=O',
        listed: listed('4.12 (q, J = 7.1 Hz, 2H)', '2.04 (s, 3H)', '1.26 (t, J = 7.1 Hz, 3H)'),
      },
    ]);
    expect(method.species[0]!.signals.map(({ id, shiftPpm, withinPpm }) => [id, shiftPpm, withinPpm])).toEqual([
      ['OCH2', 4.12, 0.05],
      ['COCH3', 2.04, 0.05],
      ['CH3', 1.26, 0.05],
    ]);
  });

  it('points at a listed signal that the structure does not lead to', () => {
    const { text, contradictions } = draft([
      { name: 'ethyl acetate', smiles: 'CCOC(C)=O', listed: listed('4.12 (t, J = 7.1 Hz, 2H)') },
    ]);
    expect(text).toContain('# look: the structure does not lead to this');
    expect(contradictions).toHaveLength(1);
  });

  it('needs listed signals for another nucleus', () => {
    expect(draftSpecies([{ name: '', smiles: 'FC(F)(F)c1ccccc1' }], '19F')).toMatchObject({
      ok: false,
      problem: { code: 'draft-nothing-to-list' },
    });
    const { method } = draft([{ name: 'x', smiles: 'FC(F)(F)c1ccccc1', listed: listed('-62.9 (s, 3F)') }], '19F');
    expect(method.species[0]!.signals[0]).toMatchObject({ id: 'CF3', nuclei: 3 });
  });

  it('cannot be broken by any name', () => {
    fc.assert(
      fc.property(fc.string(), fc.string(), (a, b) => {
        const both = [a, b].map((name) => ({ name: name.slice(0, 200), smiles: 'CCO' }));
        expect(draft(both).method.species).toHaveLength(2);
      }),
      { numRuns: 40 },
    );
  });
});

describe('uniqueIds', () => {
  it('makes letters, digits and dashes of any name, each once', () => {
    expect(uniqueIds(['=CH', 'CH', '\u2261CH', 'Caf\u00e9 au lait', ''])).toEqual([
      'CH-a',
      'CH-b',
      'CH-c',
      'Cafe-au-lait',
      'signal',
    ]);
    expect(uniqueIds(['CH', 'CH', 'CH-a'])).toEqual(['CH-a', 'CH-b', 'CH-a-b']);
  });
});

describe('listedFromMultiplets', () => {
  it('finds the counts of nuclei from the ratios of areas', () => {
    const found = [
      { shiftPpm: 1.2604, area: 304, pattern: 't', couplingsHz: [7.13] },
      { shiftPpm: 4.1202, area: 199, pattern: 'q', couplingsHz: [7.13] },
      { shiftPpm: 2.0401, area: 297, pattern: 's' },
      { shiftPpm: 3.3, area: 4, pattern: 's' },
    ];
    expect(listedFromMultiplets(found).map(({ shiftPpm, pattern, nuclei }) => [shiftPpm, pattern.text, nuclei])).toEqual([
      [4.12, 'q', 2],
      [2.04, 's', 3],
      [1.26, 't', 3],
    ]);
  });

  it('prefers small counts where the areas do not decide', () => {
    // 5 : 6 would fit better; one nucleus each with areas a fifth apart is far more likely.
    const found = [100, 120].map((area, index) => ({ shiftPpm: 2 - index, area, pattern: 's' }));
    expect(listedFromMultiplets(found).map(({ nuclei }) => nuclei)).toEqual([1, 1]);
  });

  it('is not led astray by a trace and by slow relaxation, because a quartet and a triplet count each other', () => {
    const found = [
      { shiftPpm: 6.9, area: 470, pattern: 'dq', couplingsHz: [15.5, 6.9] },
      { shiftPpm: 5.8, area: 425, pattern: 'dq', couplingsHz: [15.5, 1.7] },
      { shiftPpm: 4.1, area: 1190, pattern: 'q', couplingsHz: [7.1] },
      { shiftPpm: 3.4, area: 96, pattern: 's' },
      { shiftPpm: 1.8, area: 1630, pattern: 'dd', couplingsHz: [6.9, 1.7] },
      { shiftPpm: 1.2, area: 1800, pattern: 't', couplingsHz: [7.1] },
    ];
    expect(listedFromMultiplets(found).map(({ nuclei }) => nuclei)).toEqual([1, 1, 2, 3, 3]);
  });

  it('takes a pattern that cannot be read for a multiplet', () => {
    expect(listedFromMultiplets([{ shiftPpm: 7.2, area: 1, pattern: 'dd', couplingsHz: [8] }])[0]!.pattern.text).toBe('m');
    expect(listedFromMultiplets([])).toEqual([]);
  });
});
