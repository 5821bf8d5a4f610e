import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { fileURLToPath } from 'node:url';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import yargs from 'yargs';
import { draftCommand } from '../../src/commands/draft.js';
import { joinSources, parseNamedSmiles } from '../../src/commands/draftSources.js';
import { readMethod } from '../../src/method/readMethod.js';

describe('draft', () => {
  let folder: string;
  let out: string;
  let err: string;
  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), 'draft-'));
    out = '';
    err = '';
    vi.spyOn(process.stdout, 'write').mockImplementation((text) => {
      out += text;
      return true;
    });
    vi.spyOn(process.stderr, 'write').mockImplementation((text) => {
      err += text;
      return true;
    });
  });
  afterEach(async () => {
    vi.restoreAllMocks();
    process.exitCode = 0;
    await rm(folder, { recursive: true });
  });

  async function run(...options: string[]): Promise<number> {
    out = '';
    err = '';
    await yargs(['draft', ...options])
      .command(draftCommand as never)
      .exitProcess(false)
      .parseAsync();
    return Number(process.exitCode);
  }

  it('proposes a method from two structures on standard output', async () => {
    const structures = ['--smiles', 'OCc1ccccc1 benzyl alcohol', '--smiles', 'CC(=O)OCc1ccccc1 benzyl acetate'];
    expect(await run(...structures, '--solvent', 'chloroform-d')).toBe(0);
    const method = readMethod(out, 'draft');
    expect(method.ok && method.value.species.map(({ id }) => id)).toEqual(['benzyl-alcohol', 'benzyl-acetate']);
    expect(method.ok && method.value.solvent).toBe('CDCl3');
    const first = out;
    await run(...structures, '--solvent', 'CDCl3');
    expect(out).toBe(first);
  });

  it('proposes a method from listed data and takes the solvent from there', async () => {
    const listed = join(folder, 'experimental.txt');
    await writeFile(
      listed,
      'Ethyl acetate: 1H NMR (400 MHz, CD3OD) 4.09 (q, J = 7.1 Hz, 2H), 2.01 (s, 3H), 1.24 (t, J = 7.1 Hz, 3H)',
    );
    const file = join(folder, 'method.yaml');
    expect(await run('--listed', listed, '--smiles', 'CCOC(C)=O ethyl acetate', '--out', file)).toBe(0);
    const method = readMethod(await readFile(file, 'utf8'), file);
    if (!method.ok) throw new Error('not a method');
    expect(method.value.solvent).toBe('CD3OD');
    expect(method.value.species).toHaveLength(1);
    expect(method.value.species[0]!.signals.map(({ id }) => id)).toEqual(['OCH2', 'COCH3', 'CH3']);
    expect(await run('--listed', listed, '--out', file)).toBe(2);
    expect(err).toContain('a draft replaces nothing');
  });

  it('proposes a method from a spectrum and names its signals after the structure', async () => {
    const spectrum = fileURLToPath(new URL('../data/compounds/ethyl-vinyl-ether/spectrum.jdx', import.meta.url));
    expect(await run('--spectrum', spectrum, '--smiles', 'CCOC=C', '--solvent', 'CDCl3')).toBe(0);
    const method = readMethod(out, 'draft');
    if (!method.ok) throw new Error('not a method');
    expect(method.value.species[0]!.signals.map(({ id }) => id)).toEqual(['CH', 'CH2-a', 'CH2-b', 'OCH2', 'CH3']);
    expect(out).toContain('guess: all belong to one compound');
  });

  it('tells where a listing contradicts its structure', async () => {
    const listed = join(folder, 'experimental.txt');
    await writeFile(listed, '4.09 (t, J = 7.1 Hz, 2H)');
    expect(await run('--listed', listed, '--smiles', 'CCOC(C)=O')).toBe(0);
    expect(err).toContain('a quartet is expected, the method lists a triplet');
  });

  it.each<readonly [readonly string[], string]>([
    [[], 'draft-nothing'],
    [['--smiles', 'C(C'], 'smiles-unreadable'],
    [['--smiles', 'CCO', '--nucleus', 'proton'], 'nucleus-unknown'],
    [['--smiles', 'CCO', '--solvent', 'tea'], 'solvent-unknown'],
    [['--listed', '/nowhere/at/all.txt'], 'file-missing'],
  ])('refuses %j with %s', async (options, code) => {
    expect(await run(...options)).toBe(2);
    expect(err).toContain(code);
    expect(out).toBe('');
  });
});

describe('joinSources', () => {
  it('joins structures and listings by name, whatever their order', () => {
    const structures = ['CCO ethanol', 'CO methanol'].map(parseNamedSmiles);
    const joined = joinSources(structures, [
      { name: 'Methanol', listed: [] },
      { name: 'other', listed: [] },
    ]);
    expect(joined.map(({ name, smiles, listed }) => [name, smiles, listed !== undefined])).toEqual([
      ['ethanol', 'CCO', false],
      ['methanol', 'CO', true],
      ['other', undefined, true],
    ]);
  });

  it('joins by order when a name is missing on either side', () => {
    const joined = joinSources([parseNamedSmiles('CCO')], [{ name: 'ethanol', listed: [] }]);
    expect(joined).toEqual([{ name: 'ethanol', smiles: 'CCO', listed: [] }]);
  });
});
