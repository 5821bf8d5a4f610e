import { spawnSync } from 'node:child_process';
import { cpSync, mkdirSync, mkdtempSync, readFileSync, rmSync, utimesSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, it } from 'vitest';
import { programVersion } from '../../src/base/version.js';

const root = join(import.meta.dirname, '..', '..');
const program = join(root, 'bin', 'kinetrail.js');
const method = join(root, 'sample-runs', 'methods', 'indole-addition-19f.yaml');
const spectrum = (name: string) => join(root, 'sample-runs', 'addition-19f', name);

function run(...words: string[]) {
  const { status, stdout, stderr } = spawnSync(process.execPath, [program, ...words], {
    encoding: 'utf8',
    env: { ...process.env, NO_COLOR: '1' },
  });
  return { code: status, stdout, stderr };
}

describe('the front door', { timeout: 60_000 }, () => {
  it('prints a short page without arguments, and its version', () => {
    const page = run();
    expect(page.code).toBe(0);
    expect(page.stdout.split('\n').length).toBeLessThan(30);
    expect(page.stdout).toContain('kinetrail demo');
    expect(run('--version').stdout.trim()).toBe(programVersion);
  });

  it('suggests the nearest command for a typo and exits 2', () => {
    const typo = run('wacth');
    expect([typo.code, typo.stdout]).toEqual([2, '']);
    expect(typo.stderr).toContain('Did you mean "watch"?');
  });

  it('explains every command, with an example', () => {
    for (const name of ['watch', 'measure', 'report', 'verify', 'amend', 'check', 'draft', 'rehearse', 'demo', 'doctor']) {
      const help = run(name, '--help');
      expect([name, help.code, /Examples:/.test(help.stdout)]).toEqual([name, 0, true]);
    }
  });

  it('refuses an unknown option with exit 2', () => {
    expect(run('measure', spectrum('0067min.jdx'), '--method', method, '--jsn').code).toBe(2);
  });
});

describe('measure', { timeout: 60_000 }, () => {
  it('prints the result of a file on stdout, as text and as JSON', () => {
    const text = run('measure', spectrum('0367min.jdx'), '--method', method);
    expect([text.code, text.stderr]).toEqual([0, '']);
    expect(text.stdout).toMatch(/reactant\/CF3.*matches/);
    const json = JSON.parse(run('measure', spectrum('0367min.jdx'), '--method', method, '--json').stdout) as {
      results: { amounts: { conversion: { value: number } } }[];
    };
    // Source: trapezoid areas of the open dataset at 367 min: 17.1723 / (17.1723 + 55.9229).
    expect(json.results[0]!.amounts.conversion.value).toBeCloseTo(0.2349, 2);
  });

  it('names what cannot be read, goes on with the rest, and exits 4', () => {
    const folder = mkdtempSync(join(tmpdir(), 'kinetrail-measure-'));
    writeFileSync(join(folder, 'empty.jdx'), '');
    const ended = run(
      'measure',
      join(folder, 'empty.jdx'),
      join(folder, 'none.jdx'),
      spectrum('0367min.jdx'),
      '--method',
      method,
    );
    rmSync(folder, { recursive: true });
    expect(ended.code).toBe(4);
    expect(ended.stderr).toMatch(/empty\.jdx/);
    expect(ended.stderr).toMatch(/none\.jdx.*no such file/);
    expect(ended.stdout).toMatch(/0367min\.jdx: accepted/);
  });

  it('exits 2 for an invalid method and names the line', () => {
    const folder = mkdtempSync(join(tmpdir(), 'kinetrail-method-'));
    const file = join(folder, 'method.yaml');
    writeFileSync(file, readFileSync(method, 'utf8').replace('title:', 'titel:'));
    const ended = run('measure', spectrum('0367min.jdx'), '--method', file);
    rmSync(folder, { recursive: true });
    expect(ended.code).toBe(2);
    expect(ended.stderr).toMatch(/line 4, key titel.*unknown key.*\n\s+Did you mean "title"\?/);
  });
});

describe('a run from share to record and back', { timeout: 120_000 }, () => {
  const folder = mkdtempSync(join(tmpdir(), 'kinetrail-run-'));
  const [share, out] = [join(folder, 'share'), join(folder, 'out')];
  const quiet = new Date('2026-03-01T00:00:00Z');
  beforeAll(() => {
    mkdirSync(join(share, 'R-1'), { recursive: true });
    for (const name of ['0007min.jdx', '0067min.jdx', '0127min.jdx']) {
      cpSync(spectrum(name), join(share, 'R-1', name));
      utimesSync(join(share, 'R-1', name), quiet, quiet);
    }
  });
  afterAll(() => rmSync(folder, { recursive: true }));

  it('is followed, followed again without a change, verified, amended, rendered, and found out when a byte is flipped', () => {
    const watch = () => run('watch', share, '--method', method, '--out', out, '--once');
    expect(watch().code).toBe(0);
    const series = readFileSync(join(out, 'R-1', 'series.json'));
    const ledger = readFileSync(join(out, 'R-1', 'ledger.jsonl'));
    expect((JSON.parse(series.toString()) as { points: unknown[] }).points.length).toBe(3);
    expect(watch().code).toBe(0);
    expect(readFileSync(join(out, 'R-1', 'series.json')).equals(series)).toBe(true);
    expect(readFileSync(join(out, 'R-1', 'ledger.jsonl')).equals(ledger)).toBe(true);
    expect(run('verify', join(out, 'R-1'), '--share', share).code).toBe(0);

    const html = readFileSync(join(out, 'R-1', 'report.html'));
    const pdf = readFileSync(join(out, 'R-1', 'report.pdf'));
    expect(run('report', join(out, 'R-1')).code).toBe(0);
    expect(readFileSync(join(out, 'R-1', 'report.html')).equals(html)).toBe(true);
    expect(readFileSync(join(out, 'R-1', 'report.pdf')).equals(pdf)).toBe(true);

    expect(
      run('amend', join(out, 'R-1'), '--point', '0067min.jdx', '--set-aside', '--by', 'QA-2', '--because', 'tube was spinning')
        .code,
    ).toBe(0);
    const amended = JSON.parse(readFileSync(join(out, 'R-1', 'series.json'), 'utf8')) as {
      points: { file: string; status: string }[];
    };
    expect(amended.points.find(({ file }) => file === '0067min.jdx')!.status).toBe('set-aside');
    expect(readFileSync(join(out, 'R-1', 'report.html'), 'utf8')).toContain('tube was spinning');
    expect(run('verify', join(out, 'R-1')).code).toBe(0);

    const bytes = readFileSync(join(out, 'R-1', 'ledger.jsonl'));
    bytes[100] = bytes[100]! ^ 1;
    writeFileSync(join(out, 'R-1', 'ledger.jsonl'), bytes);
    const damaged = run('verify', join(out, 'R-1'));
    expect([damaged.code, damaged.stderr + damaged.stdout]).toEqual([3, expect.stringMatching(/entry|line/)]);
  });
});
