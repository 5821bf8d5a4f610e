import { fileURLToPath } from 'node:url';
import { describe, expect, it } from 'vitest';
import { draftFromSpectrum } from '../../src/commands/draftFromSpectrum.js';
import { printPattern } from '../../src/pattern/printPattern.js';

const data = (name: string) => fileURLToPath(new URL(`../data/${name}`, import.meta.url));

async function picked(name: string, solvent?: string) {
  const draft = await draftFromSpectrum(data(name), '1H', solvent);
  if (!draft.ok) throw new Error(draft.problem.message);
  return draft.value.source.listed!;
}

describe('draftFromSpectrum', () => {
  it('reads ethyl vinyl ether, 400 MHz: five multiplets, their patterns and counts', async () => {
    // Data: test/data/PROVENANCE.csv. Patterns and usual couplings of this compound: common practice.
    const listed = await picked('compounds/ethyl-vinyl-ether/spectrum.jdx', 'CDCl3');
    expect(listed.map(({ pattern, nuclei }) => [pattern.text, nuclei])).toEqual([
      ['dd', 1],
      ['dd', 1],
      ['dd', 1],
      ['q', 2],
      ['t', 3],
    ]);
    const usual = [[14.4, 6.8], [14.4, 1.9], [6.8, 1.9], [7], [7]];
    for (const [index, { pattern }] of listed.entries()) {
      for (const [place, { couplingHz }] of pattern.splittings.entries())
        expect(Math.abs(couplingHz! - usual[index]![place]!)).toBeLessThan(0.3);
    }
  });

  it('reads the ethyl group and the alkene of ethyl crotonate', async () => {
    const listed = await picked('compounds/ethyl-crotonate/spectrum.dx', 'CDCl3');
    const printed = listed.map(({ pattern }) => printPattern(pattern));
    expect(printed.some((text) => /^q, J = 7\.[0-2] Hz$/.test(text))).toBe(true);
    expect(printed.some((text) => /^t, J = 7\.[0-2] Hz$/.test(text))).toBe(true);
    expect(printed.some((text) => /^dd, J = 6\.9, 1\.[6-8] Hz$/.test(text))).toBe(true);
  });

  it('hands on the doubts about an axis that nothing pins', async () => {
    const draft = await draftFromSpectrum(data('compounds/ethyl-crotonate/fid.dx'), '1H', 'CDCl3');
    expect(draft.ok && draft.value.doubts.length > 0).toBe(true);
  });

  it('refuses a file that is not there', async () => {
    expect(await draftFromSpectrum(data('missing.jdx'), '1H', undefined)).toMatchObject({
      ok: false,
      problem: { code: 'file-missing' },
    });
  });
});
