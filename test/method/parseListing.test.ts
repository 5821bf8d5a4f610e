import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { parseListing } from '../../src/method/parseListing.js';

function read(text: string, nucleus = '1H') {
  const listing = parseListing(text, nucleus);
  if (!listing.ok) throw new Error(listing.problem.message);
  return listing.value.map(({ name, signals, ...rest }) => ({
    name,
    ...rest,
    signals: signals.map(({ shiftPpm, pattern, nuclei }) => `${shiftPpm} ${pattern.text} ${nuclei}`),
  }));
}

describe('parseListing', () => {
  it('reads an experimental section with its header', () => {
    const text =
      'Ethyl acetate: \u00b9H NMR (400 MHz, CDCl\u2083) \u03b4 4.12 (q, J = 7.1 Hz, 2H), 2.04 (s, 3H), 1.26 (t, J = 7.1 Hz, 3H).';
    expect(read(text)).toEqual([
      { name: 'Ethyl acetate', observeMhz: 400, solvent: 'CDCl3', signals: ['4.12 q 2', '2.04 s 3', '1.26 t 3'] },
    ]);
  });

  it('passes over the sections of other nuclei', () => {
    const text = `Methyl 4-fluorobenzoate
1H NMR (400 MHz, CDCl3): 8.05 (dd, J = 8.9, 5.5 Hz, 2H), 7.10 (t, J = 8.7 Hz, 2H), 3.91 (s, 3H);
13C NMR (101 MHz, CDCl3): 166.1, 165.7 (d, J = 254 Hz, 1C), 132.1
19F NMR (376 MHz, CDCl3): -105.6 (tt, J = 8.5, 5.5 Hz, 1F)`;
    expect(read(text)).toMatchObject([{ name: 'Methyl 4-fluorobenzoate', signals: ['8.05 dd 2', '7.1 t 2', '3.91 s 3'] }]);
    expect(read(text, '19F')).toMatchObject([{ observeMhz: 376, signals: ['-105.6 tt 1'] }]);
  });

  it('divides compounds at empty lines and at named lines', () => {
    const text = `# a remark
alcohol: 4.69 (s, 2H), 7.40-7.28 (m, 5H)
ester: 5.11 (s, 2H), 2.10 (s, 3H)

2-Phenylethanol: 3.86 (t, J = 6.6 Hz, 2H)`;
    expect(read(text).map(({ name, signals }) => [name, signals.length])).toEqual([
      ['alcohol', 2],
      ['ester', 2],
      ['2-Phenylethanol', 1],
    ]);
  });

  it('reads one entry a line, brackets inside entries, ranges and a following assignment', () => {
    const text = `5.01 (sept, J = 6.3 Hz, 1H, (CH3)2CH)
7.28 \u2013 7.40 (m, 5H) ArH
1.23 (d, J = 6.3 Hz, 6H)`;
    expect(read(text)).toEqual([{ name: '', signals: ['5.01 sept 1', '7.34 m 5', '1.23 d 6'] }]);
  });

  it('names the compound whose entry cannot be read', () => {
    const listing = parseListing('Ethyl acetate: 4.12 (q, J = 7.1 Hz, 2H), 1.26 (triplett, 3H)', '1H');
    expect(listing.ok ? 'read' : listing.problem.message).toContain('Ethyl acetate: ');
  });

  it('refuses text without listed signals, and too much text', () => {
    expect(parseListing('nothing here', '1H')).toMatchObject({ ok: false, problem: { code: 'listing-empty' } });
    expect(parseListing('x'.repeat(200_001), '1H')).toMatchObject({ ok: false, problem: { code: 'listing-too-large' } });
  });

  it('answers any text with a result, never with a throw', () => {
    fc.assert(
      fc.property(fc.string(), (text) => {
        expect(typeof parseListing(text, '1H').ok).toBe('boolean');
      }),
    );
  });
});
