import { describe, expect, it } from 'vitest';
import { couplingNetwork } from '../../src/method/couplingNetwork.js';
import { type Entry, speciesOf } from './speciesOf.js';

/** Couplings as `a-b J sets`, for short expectations. */
function summary(entries: Readonly<Record<string, Entry>>, smiles?: string) {
  const network = couplingNetwork(speciesOf(entries, smiles === undefined ? {} : { smiles }));
  return {
    couplings: network.couplings.map(({ a, b, couplingHz, sets }) => `${a}-${b} ${couplingHz}${sets > 1 ? ` x${sets}` : ''}`),
    unexplained: [...network.unexplained].flatMap(([id, rest]) =>
      rest.map(({ neighbours, couplingHz }) => `${id} ${neighbours} ${couplingHz}`),
    ),
    contradictions: network.contradictions.map(({ a, b }) => `${a}-${b}`),
    ambiguous: network.ambiguous,
  };
}
const none = { unexplained: [], contradictions: [], ambiguous: [] };

describe('couplingNetwork infers partners from the listed couplings', () => {
  it('finds the ethyl group of an ester', () => {
    expect(summary({ CH2: '4.12 (q, J = 7.1 Hz, 2H)', CH3: '1.25 (t, J = 7.2 Hz, 3H)', Ac: '2.04 (s, 3H)' })).toEqual({
      ...none,
      couplings: ['CH2-CH3 7.15'],
    });
  });

  it('finds a propyl chain, where a sextet is a methyl and a methylene', () => {
    const entries = { CH3: '0.94 (t, J = 7.4 Hz, 3H)', CH2: '1.64 (sext, J = 7.4 Hz, 2H)', CO: '2.28 (t, J = 7.4 Hz, 2H)' };
    expect(summary(entries)).toEqual({ ...none, couplings: ['CH3-CH2 7.4', 'CH2-CO 7.4'] });
  });

  it('finds the partners in ethyl crotonate although 6.9 and 7.1 Hz are nearly one coupling', () => {
    const entries = {
      ethylCH3: '1.28 (t, J = 7.1 Hz, 3H)',
      CH3: '1.88 (dd, J = 6.9, 1.7 Hz, 3H)',
      OCH2: '4.18 (q, J = 7.1 Hz, 2H)',
      alpha: '5.84 (dq, J = 15.5, 1.7 Hz, 1H)',
      beta: '6.97 (dq, J = 15.5, 6.9 Hz, 1H)',
    };
    expect(summary(entries)).toEqual({
      ...none,
      couplings: ['ethylCH3-OCH2 7.1', 'CH3-alpha 1.7', 'CH3-beta 6.9', 'alpha-beta 15.5'],
    });
  });

  it('finds an ABX system, the geminal coupling negative', () => {
    const entries = {
      X: '4.30 (dd, J = 9.5, 4.5 Hz, 1H)',
      A: '3.10 (dd, J = 14.0, 4.5 Hz, 1H)',
      B: '2.95 (dd, J = 14.0, 9.5 Hz, 1H)',
    };
    expect(summary(entries)).toEqual({ ...none, couplings: ['X-A 4.5', 'X-B 9.5', 'A-B -14'] });
    const alkene = { a: '7.6 (d, J = 16.0 Hz, 1H)', b: '6.4 (d, J = 16.0 Hz, 1H)' };
    expect(summary(alkene).couplings).toEqual(['a-b 16']);
  });

  it('finds an isopropyl group', () => {
    const entries = { CH: '5.01 (sept, J = 6.3 Hz, 1H)', CH3: '1.23 (d, J = 6.3 Hz, 6H)' };
    expect(summary(entries).couplings).toEqual(['CH-CH3 6.3']);
  });

  it('reads two doublets of two protons as a para-disubstituted ring: two sets', () => {
    const entries = { ortho: '7.95 (d, J = 8.7 Hz, 2H)', meta: '6.90 (d, J = 8.7 Hz, 2H)' };
    expect(summary(entries)).toEqual({ ...none, couplings: ['ortho-meta 8.7 x2'] });
  });

  it('reads a listed phenyl group as two sets that share the para proton', () => {
    const entries = { o: '8.05 (d, J = 7.7 Hz, 2H)', m: '7.44 (t, J = 7.6 Hz, 2H)', p: '7.55 (t, J = 7.5 Hz, 1H)' };
    expect(summary(entries)).toEqual({ ...none, couplings: ['o-m 7.65 x2', 'm-p 7.5'] });
  });

  it('reads a symmetric ketone as two sets', () => {
    const entries = { CH3: '0.91 (t, J = 7.4 Hz, 6H)', CH2: '1.60 (sext, J = 7.4 Hz, 4H)', CO: '2.37 (t, J = 7.4 Hz, 4H)' };
    expect(summary(entries).couplings).toEqual(['CH3-CH2 7.4 x2', 'CH2-CO 7.4 x2']);
  });

  it('leaves a fluorine coupling unexplained', () => {
    const entries = { a: '7.60 (dd, J = 8.8, 5.3 Hz, 2H)', b: '7.05 (t, J = 8.7 Hz, 2H)' };
    expect(summary(entries)).toEqual({ ...none, couplings: ['a-b 8.75 x2'], unexplained: ['a 1 5.3', 'b 1 8.7'] });
  });

  it('leaves the missing neighbour of a chain unexplained', () => {
    const entries = { CH3: '0.94 (t, J = 7.4 Hz, 3H)', CH2: '1.64 (sext, J = 7.4 Hz, 2H)' };
    expect(summary(entries)).toEqual({ ...none, couplings: ['CH3-CH2 7.4'], unexplained: ['CH2 2 7.4'] });
  });

  it('chooses nothing between two ethyl groups of equal coupling', () => {
    const entries = {
      q1: '4.12 (q, J = 7.1 Hz, 2H)',
      q2: '3.47 (q, J = 7.0 Hz, 2H)',
      t1: '1.25 (t, J = 7.1 Hz, 3H)',
      t2: '1.20 (t, J = 7.0 Hz, 3H)',
    };
    const found = summary(entries);
    expect(found.couplings).toEqual([]);
    expect(found.ambiguous).toEqual(['q1', 'q2', 't1', 't2']);
  });

  it('does not pair two doublets while an unassigned multiplet may hold the partner', () => {
    const entries = { a: '7.95 (d, J = 8.0 Hz, 1H)', b: '7.60 (d, J = 8.1 Hz, 1H)', rest: '7.40-7.20 (m, 2H)' };
    expect(summary(entries).couplings).toEqual([]);
    const aliphatic = { a: '7.95 (d, J = 8.0 Hz, 1H)', b: '7.60 (d, J = 8.1 Hz, 1H)', rest: '1.40-1.20 (m, 2H)' };
    expect(summary(aliphatic).couplings).toEqual(['a-b 8.05']);
  });

  it('lets the structure choose where the couplings alone cannot', () => {
    const entries = {
      OCH2: '4.12 (q, J = 7.1 Hz, 2H)',
      COCH2: '2.32 (q, J = 7.1 Hz, 2H)',
      CH3: '1.25 (t, J = 7.1 Hz, 3H)',
      other: '1.14 (t, J = 7.1 Hz, 3H)',
    };
    expect(summary(entries).couplings).toEqual([]);
    const found = summary(entries, 'CCOC(=O)CC').couplings;
    expect(found).toContain('OCH2-CH3 7.1');
    expect(found).toContain('COCH2-other 7.1');
  });

  it('lets a listed nonet be the mean of its couplings when the structure names the partners', () => {
    const entries = { ArCH2: '2.44 (d, J = 7.1 Hz, 2H)', CH: '1.84 (non, J = 6.7 Hz, 1H)', CH3: '0.89 (d, J = 6.6 Hz, 6H)' };
    expect(summary(entries).couplings).toEqual(['CH-CH3 6.6']);
    expect(summary(entries, 'CC(C)Cc1ccccc1')).toEqual({ ...none, couplings: ['ArCH2-CH 7.1', 'CH-CH3 6.6'] });
  });

  it('does not pair triplets that the structure places apart', () => {
    const entries = { OCH2: '4.05 (t, J = 6.8 Hz, 2H)', COCH2: '2.30 (t, J = 6.9 Hz, 2H)' };
    expect(summary(entries).couplings).toEqual(['OCH2-COCH2 6.85']);
    expect(summary(entries, 'CC(=O)OCCCCC(C)=O').couplings).toEqual([]);
  });

  it('couples nothing to a singlet, to a pattern without couplings, or across different couplings', () => {
    expect(summary({ a: '3.7 (s, 3H)', b: '3.5 (s, 2H)' }).couplings).toEqual([]);
    expect(summary({ a: '4.1 (q, 2H)', b: '1.2 (t, 3H)' }).couplings).toEqual([]);
    expect(summary({ a: '4.1 (q, J = 7.1 Hz, 2H)', b: '1.2 (t, J = 7.6 Hz, 3H)' }).couplings).toEqual([]);
  });
});

describe('couplingNetwork follows `coupled`', () => {
  it('chooses between the two ethyl groups when one is named', () => {
    const entries = {
      q1: { listed: '4.12 (q, J = 7.1 Hz, 2H)', coupled: { t2: 7.1 } },
      q2: '3.47 (q, J = 7.0 Hz, 2H)',
      t1: '1.25 (t, J = 7.0 Hz, 3H)',
      t2: '1.20 (t, J = 7.1 Hz, 3H)',
    };
    expect(summary(entries).couplings).toEqual(['q1-t2 7.1', 'q2-t1 7']);
  });

  it('names a contradiction when the listed pattern cannot show the partner', () => {
    const entries = { CH2: { listed: '4.12 (t, J = 7.1 Hz, 2H)', coupled: { CH3: 7.1 } }, CH3: '1.25 (t, J = 7.1 Hz, 3H)' };
    expect(summary(entries)).toMatchObject({ couplings: [], contradictions: ['CH2-CH3'] });
  });

  it('accepts the couplings that a listed quintet is the mean of', () => {
    const entries = {
      a: { listed: '1.38 (sext, J = 7.4 Hz, 2H)', coupled: { b: 7.5 } },
      b: { listed: '1.61 (quint, J = 7.0 Hz, 2H)', coupled: { c: 6.6 } },
      c: '4.06 (t, J = 6.6 Hz, 2H)',
    };
    expect(summary(entries)).toMatchObject({ couplings: ['a-b 7.5', 'b-c 6.6'], contradictions: [], unexplained: ['a 3 7.4'] });
  });

  it('accepts a multiplet with named partners, and a small coupling that the listing does not resolve', () => {
    const multiplet = { CH2: { listed: '1.70-1.55 (m, 2H)', coupled: { CH3: 7.4 } }, CH3: '0.95 (t, J = 7.4 Hz, 3H)' };
    expect(summary(multiplet).couplings).toEqual(['CH2-CH3 7.4']);
    const small = { CH: { listed: '6.3 (s, 1H)', coupled: { CH3: 0.9 } }, CH3: '2.1 (s, 3H)' };
    expect(summary(small).couplings).toEqual(['CH-CH3 0.9']);
  });
});
