import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import fc from 'fast-check';
import { describe, expect, it } from 'vitest';
import { matchGlob } from '../../src/method/matchGlob.js';
import { readMethod } from '../../src/method/readMethod.js';
import { readRunFile } from '../../src/method/readRunFile.js';
import { readSiteFile } from '../../src/method/readSiteFile.js';
import { jsonSchemas } from '../../src/method/schema.js';

const root = join(import.meta.dirname, '..', '..');
const good = `kinetrail: method/1
title: Acetylation of benzyl alcohol
version: "3"
nucleus: 1H
solvent: CDCl3
reference:
  signal: tetramethylsilane
  shift: 0.0
species:
  - id: alcohol
    name: Benzyl alcohol
    role: starting-material
    smiles: OCc1ccccc1
    molar_mass: 108.14
    signals:
      - {id: CH2, listed: "4.69 (s, 2H)"}
      - {id: Ar, listed: "7.40-7.28 (m, 5H)", use: ignore}
  - id: ester
    role: product
    smiles: CC(=O)OCc1ccccc1
    signals:
      - {id: OCH2, listed: "5.11 (s, 2H)"}
      - id: acetyl
        shift: 2.10
        within: 0.03
        pattern: s
        couplings_hz: []
        nuclei: 3
        use: quantify
        moves: false
conversion:
  of: alcohol
  to: ester
  target: 0.98
limits:
  - {species: alcohol, quantity: mole-fraction, at_most: 0.02}
purity: {of: ester, at_least: 0.95}
residual_solvents: {limits: ich-q3c, of: ester}
`;

function problems(text: string) {
  const result = readMethod(text, 'method.yaml');
  return result.ok ? [] : result.problem;
}

describe('readMethod', () => {
  it('reads the method file of the contract', () => {
    const result = readMethod(good, 'method.yaml');
    if (!result.ok) throw new Error(JSON.stringify(result.problem));
    const [alcohol, ester] = result.value.species;
    expect(alcohol!.signals[1]).toMatchObject({
      key: 'alcohol/Ar',
      rangePpm: [7.28, 7.4],
      nuclei: 5,
      use: 'ignore',
      withinPpm: 0.05,
    });
    expect(ester!.signals[1]).toMatchObject({ shiftPpm: 2.1, withinPpm: 0.03, nuclei: 3, use: 'quantify', moves: false });
    expect(ester!.molarMass).toBeCloseTo(150.177, 2);
    expect(result.value.processing).toEqual({
      lineBroadeningHz: 'matched',
      zeroFilling: 2,
      phase: 'automatic',
      baseline: 'automatic',
    });
  });

  it('takes protons for nuclei, and listed and key by key for the same', () => {
    const keyed = good.replace('nuclei: 3', 'protons: 3');
    const listed = good.replace(/- id: acetyl\n(\s+.*\n){7}/, '- {id: acetyl, listed: "2.10 (s, 3H)", within: 0.03}\n');
    const [a, b] = [readMethod(keyed, 'a'), readMethod(listed, 'b')];
    if (!a.ok || !b.ok) throw new Error(JSON.stringify([a, b]));
    expect(b.value.species[1]!.signals[1]).toEqual(a.value.species[1]!.signals[1]);
  });

  const broken: readonly (readonly [
    title: string,
    from: string | RegExp,
    to: string,
    code: string,
    line: number,
    says: RegExp,
  ])[] = [
    ['an unknown key, with the nearest known one', 'title:', 'titel:', 'key-unknown', 2, /"titel".*title/],
    ['a missing key', /title: .*\n/, '', 'key-missing', 1, /title/],
    ['a role that is not one, with the nearest', 'role: product', 'role: prodct', 'value-wrong', 19, /prodct.*product/],
    ['a wrong type', 'target: 0.98', 'target: most', 'value-wrong', 34, /"most".*number/],
    ['a share above one', 'target: 0.98', 'target: 98', 'value-wrong', 34, /98.*at most 1/],
    ['the same key twice', 'nucleus: 1H', 'nucleus: 1H\nnucleus: 1H', 'yaml-syntax', 5, /unique/i],
    ['broken YAML', 'reference:', 'reference: [', 'yaml-syntax', 7, /./],
    ['a species that is not there', 'of: alcohol', 'of: alcohl', 'species-unknown', 32, /alcohl.*alcohol/],
    ['an id used twice', 'id: ester', 'id: alcohol', 'id-twice', 18, /second time/],
    [
      'a reference that is not known',
      'signal: tetramethylsilane',
      'signal: tetramethylsilan',
      'reference-unknown',
      7,
      /tetramethylsilane/,
    ],
    ['a solvent that is not known', 'solvent: CDCl3', 'solvent: CDCl4', 'solvent-unknown', 5, /CDCl3/],
    ['a listing that cannot be read', '5.11 (s, 2H)', '5.11 (zz, 2H)', 'listed-pattern-missing', 22, /./],
    ['a listing of another nucleus', '5.11 (s, 2H)', '5.11 (s, 2F)', 'signal-nucleus', 22, /F/],
    [
      'a molar mass that the structure contradicts',
      'molar_mass: 108.14',
      'molar_mass: 180.14',
      'molar-mass-differs',
      14,
      /180\.14.*108\.1/,
    ],
  ];
  for (const [title, from, to, code, line, says] of broken) {
    it(`names ${title}`, () => {
      const found = problems(good.replace(from, to));
      const problem = found.find((entry) => entry.code === code) ?? found[0];
      expect(problem).toMatchObject({ code, where: { file: 'method.yaml', line } });
      expect(`${problem!.message} ${problem!.hint ?? ''}`).toMatch(says);
    });
  }

  it('reports every fault at once, in order of line', () => {
    const lines = problems(good.replace('title:', 'titel:').replace('role: product', 'role: prodct')).map(
      ({ where }) => where!.line!,
    );
    expect(lines.length).toBe(3);
    expect(lines).toEqual([...lines].sort((a, b) => a - b));
  });

  it('refuses a coupling that its two sides state differently', () => {
    const text = good
      .replace('{id: OCH2, listed: "5.11 (s, 2H)"}', '{id: OCH2, listed: "5.11 (s, 2H)", coupled: {acetyl: 7.1}}')
      .replace('moves: false', 'moves: false\n        coupled: {OCH2: 7.3}');
    expect(problems(text).map(({ code }) => code)).toContain('coupled-differs');
  });

  it('never throws, whatever the text', () => {
    fc.assert(
      fc.property(fc.string(), (text) => void readMethod(text, 'x')),
      { numRuns: 300 },
    );
    for (const hostile of [
      '__proto__: {a: 1}',
      'constructor: 1',
      'a: &a [*a]',
      `${'['.repeat(5000)}`,
      '&a [&b [*a, *a], *b, *b, *b]'.repeat(50),
    ]) {
      expect(readMethod(hostile, 'x').ok).toBe(false);
    }
  });
});

describe('readRunFile', () => {
  it('reads the run file of the contract and keeps times in UTC', () => {
    const result = readRunFile(
      'kinetrail: run/1\nbatch: LOT-7731\nstarted: 2026-03-14T20:30:00+01:00\nsample_mass_mg: 24.113\nsample_mass_u_mg: 0.02\n',
      'run.yaml',
    );
    expect(result).toMatchObject({
      ok: true,
      value: { batch: 'LOT-7731', started: '2026-03-14T19:30:00Z', sampleMassMg: 24.113 },
    });
  });

  it('refuses a negative mass and a time without a zone, naming the line', () => {
    const result = readRunFile('kinetrail: run/1\nstarted: 2026-03-14T19:30:00\nstandard_mass_mg: -1\n', 'run.yaml');
    if (result.ok) throw new Error('must fail');
    expect(result.problem.map(({ where }) => where!.line)).toEqual([2, 3]);
  });
});

describe('readSiteFile', () => {
  it('reads the site file of the contract', () => {
    const text = `kinetrail: site/1
runs:
  - {match: "BX-*", method: methods/oxidation.yaml}
  - {match: "**", method: methods/default.yaml}
settle_s: 30
poll_s: 20
workers: 2
tell:
  - {on: [target-reached, stalled, limit-broken, silent, trouble], webhook: "http://127.0.0.1:9000/hook"}
  - {on: [target-reached, final-report], mail: {to: ["night@example.org"], server: "smtp://127.0.0.1:2525"}}
silent_after_min: 45
`;
    const result = readSiteFile(text, 'kinetrail.yaml');
    if (!result.ok) throw new Error(JSON.stringify(result.problem));
    expect(result.value.runs.length).toBe(2);
    expect(result.value.tell[1]!.mail).toEqual({ to: ['night@example.org'], server: 'smtp://127.0.0.1:2525' });
  });

  it('refuses an entry that tells nobody', () => {
    const result = readSiteFile('kinetrail: site/1\ntell:\n  - {on: [stalled]}\n', 'kinetrail.yaml');
    expect(result.ok ? '' : result.problem[0]!.code).toBe('tell-without-target');
  });
});

it('matches run folders as a site file means them, in time that stars cannot blow up', () => {
  const table: readonly (readonly [string, string, boolean])[] = [
    ['BX-0417', 'BX-*', true],
    ['BY-0417', 'BX-*', false],
    ['plant/BX-1', 'BX-*', false],
    ['plant/BX-1', '**', true],
    ['plant/BX-1', '**/BX-?', true],
    ['a/b/c', 'a/**/c', true],
    ['a', 'a/**', true],
    ['BX-12', 'BX-?', false],
  ];
  for (const [path, pattern, expected] of table)
    expect([path, pattern, matchGlob(path, pattern)]).toEqual([path, pattern, expected]);
  expect(matchGlob('a'.repeat(400), `${'*a'.repeat(200)}b`)).toBe(false);
});

it('publishes schemas that are those of the code (npm run schemas writes them again)', () => {
  for (const [name, schema] of Object.entries(jsonSchemas())) {
    const published: unknown = JSON.parse(readFileSync(join(root, 'templates', 'schemas', `${name}.schema.json`), 'utf8'));
    expect(published).toEqual(JSON.parse(JSON.stringify(schema)));
  }
});

it('ships method templates and sample methods that read without a fault', () => {
  for (const folder of [join(root, 'templates', 'methods'), join(root, 'sample-runs', 'methods')]) {
    for (const name of readdirSync(folder)) {
      const result = readMethod(readFileSync(join(folder, name), 'utf8'), name);
      expect(result.ok ? [] : result.problem.map(({ message }) => message)).toEqual([]);
    }
  }
});
