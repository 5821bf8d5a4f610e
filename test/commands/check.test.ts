import { mkdtemp, readFile, rm, writeFile } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterEach, beforeEach, describe, expect, it, vi } from 'vitest';
import yargs from 'yargs';
import { checkCommand } from '../../src/commands/check.js';

const goodMethod = `kinetrail: method/1
title: Transesterification <of> an "ester"
version: "1"
nucleus: 1H
solvent: CDCl3
reference: {signal: tetramethylsilane}
species:
  - id: ester
    role: starting-material
    smiles: CCOC(C)=O
    signals:
      - {id: OCH2, listed: "4.12 (q, J = 7.1 Hz, 2H)"}
      - {id: CH3, listed: "1.26 (t, J = 7.1 Hz, 3H)"}
  - id: propionate
    role: product
    smiles: CCOC(=O)CC
    signals:
      - {id: OCH2, listed: "4.14 (q, J = 7.1 Hz, 2H)"}
conversion: {of: ester, to: propionate}
`;

describe('check', () => {
  let folder: string;
  let out: string;
  let err: string;
  beforeEach(async () => {
    folder = await mkdtemp(join(tmpdir(), 'check-'));
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

  async function run(method: string, ...options: string[]): Promise<number> {
    const path = join(folder, 'method.yaml');
    await writeFile(path, method);
    await yargs(['check', path, ...options])
      .command(checkCommand as never)
      .exitProcess(false)
      .parseAsync();
    return Number(process.exitCode);
  }

  it('prints structure, pattern at each field and collisions, and ends with 0', async () => {
    expect(await run(goodMethod, '--at', '60,400')).toBe(0);
    expect(out).toContain('OCH2 has three neighbours: a quartet is expected, agrees');
    expect(out).toContain('exactly, coupled to CH3 (7.1 Hz, inferred)');
    expect(out).toMatch(/60 MHz {6}4 peaks/);
    expect(out).toMatch(/at 60 MHz ester\/OCH2 and propionate\/OCH2 overlap by \d+ %/);
    expect(out).toContain('contradictions: none');
    expect(err).toBe('');
  });

  it("counts the residual solvent and water of the method's solvent", async () => {
    const aromatic = goodMethod
      .replace('4.14 (q, J = 7.1 Hz, 2H)', '7.25 (s, 2H)')
      .replace('smiles: CCOC(=O)CC\n', 'name: any\n');
    expect(await run(aromatic, '--at', '60')).toBe(0);
    expect(out).toMatch(/propionate\/OCH2 and residual CDCl3 overlap by \d+ %/);
  });

  it('explains a pattern that contradicts the structure, and ends with 2', async () => {
    expect(await run(goodMethod.replace('4.12 (q,', '4.12 (t,'))).toBe(2);
    expect(out).toContain('the OCH2 of CCOC(C)=O has three neighbours: a quartet is expected, the method lists a triplet');
  });

  it('prints one JSON object with the lines of every field', async () => {
    await run(goodMethod, '--at', '60,400', '--json');
    const report = JSON.parse(out);
    expect(report.format).toBe('kinetrail.check/1');
    expect(report.fieldsMhz).toEqual([60, 400]);
    expect(report.species[0].signals[0].atFields[1].peaks).toHaveLength(4);
    expect(JSON.stringify(report)).not.toContain('null');
  });

  it('writes a page without scripts or outside references, with every text escaped, the same bytes each time', async () => {
    const page = join(folder, 'check.html');
    expect(await run(goodMethod, '--html', page)).toBe(0);
    const html = await readFile(page, 'utf8');
    expect(html).toContain("default-src 'none'");
    expect(html).toContain('Transesterification &lt;of&gt; an &quot;ester&quot;');
    expect(html).not.toMatch(/<script|https?:|<of>/);
    expect(html.match(/<svg/g)).toHaveLength(6);
    expect(html.match(/<h1/g)).toHaveLength(1);
    expect(html).not.toMatch(/NaN|undefined|Infinity/);
    await run(goodMethod, '--html', page);
    expect(await readFile(page, 'utf8')).toBe(html);
  });

  it.each([
    ['--at', 'high'],
    ['--at', '60,,400'],
    ['--at', '0'],
    ['--at', '1,2,3,4,5,6,7,8,9'],
    ['--width', '0'],
  ])('refuses %s %s', async (...options) => {
    expect(await run(goodMethod, ...options)).toBe(2);
    expect(err).toContain(`error: ${options[0]}`);
    expect(out).toBe('');
  });

  it('names the line of a method that is invalid', async () => {
    expect(await run(goodMethod.replace('role: product', 'role: produkt'))).toBe(2);
    expect(err).toMatch(/line 1[4-6]/);
  });

  it('says why a page cannot be written', async () => {
    expect(await run(goodMethod, '--html', join(folder, 'missing', 'check.html'))).toBe(2);
    expect(err).toContain('page-unwritable');
  });
});
