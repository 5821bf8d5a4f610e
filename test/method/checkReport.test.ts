import { describe, expect, it } from 'vitest';
import { checkMethod } from '../../src/method/checkReport.js';
import { methodOf } from './methodOf.js';
import { type Entry, speciesOf } from './speciesOf.js';

const species = (id: string, entries: Readonly<Record<string, Entry>>, smiles?: string) =>
  speciesOf(entries, { id, ...(smiles !== undefined ? { smiles } : {}) });

const ethyl = (id: string, shift: number) =>
  species(id, { OCH2: `${shift} (q, J = 7.1 Hz, 2H)`, CH3: '1.25 (t, J = 7.1 Hz, 3H)' });

describe('checkMethod', () => {
  it('puts the structure beside the listing, and the pattern at every field', () => {
    const report = checkMethod(
      methodOf([species('ester', { OCH2: '4.12 (q, J = 7.1 Hz, 2H)', CH3: '1.25 (t, J = 7.1 Hz, 3H)' }, 'CCOC(C)=O')]),
      [60, 400],
    );
    const [ester] = report.species;
    expect(ester).toMatchObject({ formula: 'C4H8O2', unlisted: [{ label: 'COCH3', nuclei: 3, expected: 's' }] });
    expect(ester!.molarMass).toBeCloseTo(88.106, 3);
    const [quartet] = ester!.signals;
    expect(quartet).toMatchObject({
      key: 'ester/OCH2',
      basis: 'exact',
      partners: [{ signal: 'CH3', couplingHz: 7.1, origin: 'inferred' }],
      structure: { labels: ['OCH2'], expected: 'q', agrees: true },
    });
    expect(quartet!.atFields.map(({ observeMhz }) => observeMhz)).toEqual([60, 400]);
    const [low, high] = quartet!.atFields;
    expect(high!.peaks).toHaveLength(4);
    expect(high!.spanHz).toBeCloseTo(21.3, 0);
    // The roof: at 60 MHz the side of the methyl is taller by far, at 400 MHz a little.
    const lean = ({ peaks }: typeof low & object) => peaks.at(-1)!.height / peaks[0]!.height;
    expect(lean(low!)).toBeGreaterThan(1.2);
    expect(lean(high!)).toBeGreaterThan(1);
    expect(lean(high!)).toBeLessThan(1.1);
  });

  it('finds a collision at 60 MHz that is none at 600 MHz, with what a fit costs', () => {
    const report = checkMethod(methodOf([ethyl('ester', 4.12), ethyl('carbonate', 4.19)]), [60, 600]);
    const quartets = report.collisions.filter(({ a }) => a === 'ester/OCH2');
    expect(quartets).toHaveLength(1);
    const [collision] = quartets;
    expect(collision).toMatchObject({ observeMhz: 60, a: 'ester/OCH2', b: 'carbonate/OCH2' });
    expect(collision!.overlap).toBeGreaterThan(0.1);
    expect(collision!.message).toMatch(
      /^at 60 MHz ester\/OCH2 and carbonate\/OCH2 overlap by \d+ %: not measurable by plain integration, .*by fit/,
    );
  });

  it('says when two signals cannot be told apart at all', () => {
    const report = checkMethod(methodOf([ethyl('ester', 4.12), ethyl('carbonate', 4.19)]), [400]);
    const methyls = report.collisions.find(({ a }) => a === 'ester/CH3');
    expect(methyls!.message).toContain('cannot be told apart');
    expect(methyls!.uFactorA).toBeGreaterThan(20);
  });

  it('reports a signal inside a multiplet of undeclared lines', () => {
    const ring = species('toluene', { Ar: '7.30-7.10 (m, 5H)' });
    const report = checkMethod(methodOf([ring, species('other', { ArH: '7.20 (s, 1H)' })]), [400]);
    expect(report.collisions).toHaveLength(1);
    expect(report.collisions[0]!.message).toContain('not declared');
    expect(report.species[0]!.signals[0]!.basis).toBe('undeclared');
  });

  it('finds no collision between signals far apart, nor inside one species', () => {
    const report = checkMethod(
      methodOf([species('a', { x: '4.0 (s, 3H)', y: '4.01 (s, 3H)' }), species('b', { z: '2.0 (s, 3H)' })]),
      [400],
    );
    expect(report.collisions).toEqual([]);
  });

  it('counts residual solvent and water among what a signal may collide with', () => {
    const water = { name: 'water', shiftPpm: 1.56, lines: [{ offsetHz: 0, share: 1 }] };
    const method = methodOf([species('a', { x: '1.57 (s, 3H)', y: '4.01 (s, 3H)' })]);
    expect(checkMethod(method, [60], 1, [water]).collisions.map(({ a, b }) => [a, b])).toEqual([['a/x', 'water']]);
  });

  it('remarks on a signal where a 13C satellite of another species falls, at the field where it does', () => {
    // A methoxy group couples by 143 Hz: its satellites lie 71.5 Hz, at 400 MHz 0.179 ppm, on either side.
    const method = methodOf([species('main', { OCH3: '3.70 (s, 3H)' }), species('trace', { OCH3: '3.88 (s, 3H)' })]);
    const remarks = checkMethod(method, [400, 60]).flags;
    expect(remarks.map(({ code, signal, weight }) => [code, signal, weight])).toEqual([
      ['satellite-near', 'main/OCH3', 'note'],
      ['satellite-near', 'trace/OCH3', 'note'],
    ]);
    expect(remarks[1]!.message).toContain(
      'at 400 MHz a 13C satellite of main/OCH3 falls on or beside it, up to 0.535 % of that signal',
    );
  });

  it('puts contradictions before remarks', () => {
    const report = checkMethod(
      methodOf([
        species('alcohol', { CH2: '3.44 (dq, J = 5.1, 7.0 Hz, 2H)' }, 'OCC'),
        species(
          'ester',
          { OCH2: { listed: '4.12 (t, J = 7.1 Hz, 2H)', coupled: { CH3: 7.1 } }, CH3: '1.25 (t, J = 7.1 Hz, 3H)' },
          'CCOC(C)=O',
        ),
      ]),
      [400],
    );
    expect(report.flags.map(({ code }) => code)).toEqual(['coupling-contradicted', 'structure-pattern', 'structure-note']);
  });

  it('remarks on neighbours whose listed couplings differ', () => {
    const ester = species('ester', { OCH2: '4.12 (q, J = 7.1 Hz, 2H)', CH3: '1.25 (t, J = 7.6 Hz, 3H)' }, 'CCOC(C)=O');
    const report = checkMethod(methodOf([ester]), [400]);
    expect(report.flags).toMatchObject([{ code: 'coupling-unequal', weight: 'note', signal: 'ester/OCH2' }]);
    expect(report.flags[0]!.message).toContain('ester/OCH2 lists 7.1 Hz and ester/CH3 7.6 Hz');
  });

  it('names a structure that cannot be read, and goes on', () => {
    const report = checkMethod(methodOf([species('ester', { CH3: '1.25 (s, 3H)' }, 'C(C')]), [400]);
    expect(report.problems.map(({ code }) => code)).toEqual(['smiles-unreadable']);
    expect(report.species[0]!.signals[0]!.atFields[0]!.lines).toHaveLength(1);
  });
});
