import { existsSync, mkdirSync, readdirSync, readFileSync, statSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, describe, expect, it } from 'vitest';
import { hashTree, makePlace, type Place, pause, program, putFile, start } from '../fault/processes.js';

const places: Place[] = [];
afterEach(() => {
  for (const made of places.splice(0)) made.remove();
});

function place(): Place {
  const made = makePlace();
  places.push(made);
  return made;
}

/** Stands for a real spectrum: whole, but with a check ordinate that fails, so that nothing is measured. */
const corrupt = '##TITLE=x\n##JCAMP-DX=5.01\n##DATA TYPE=NMR FID\n##XYDATA=(X++(Y..Y))\n0 1 2\n##END=\n';

const run = (...args: string[]) => start(process.execPath, [program, ...args], { env: { ...process.env, NO_COLOR: '1' } }).ended;
const once = (here: Place, ...more: string[]) =>
  run('watch', here.share, '--method', here.method, '--out', here.out, '--once', ...more);

describe('the commands around a record, as processes', { timeout: 60_000 }, () => {
  it('watch: wrong usage and invalid files exit 2 and name file, line and key', async () => {
    const here = place();
    putFile(here, 'a.jdx', corrupt);
    expect((await run('watch', here.share, '--once')).code).toBe(2);
    expect((await once(here, '--settle', '-1')).code).toBe(2);
    const nested = await run('watch', here.share, '--method', here.method, '--out', join(here.share, 'out'), '--once');
    expect([nested.code, nested.stderr]).toEqual([2, expect.stringContaining('lie in one another')]);
    writeFileSync(here.method, readFileSync(here.method, 'utf8').replace('role: product', 'role: produkt'));
    const invalid = await once(here);
    expect([invalid.code, invalid.stderr]).toEqual([2, expect.stringMatching(/line 11, key .*role.*product/s)]);
    expect(existsSync(here.out)).toBe(false);
    expect(readdirSync(here.share)).toEqual(['BX-0417']);
  });

  it('watch: a missing share exits 6, a file as share 2', async () => {
    const here = place();
    const missing = await run('watch', join(here.root, 'none'), '--out', here.out, '--once');
    expect([missing.code, missing.stderr]).toEqual([6, expect.stringContaining('not available')]);
    expect((await run('watch', here.method, '--out', here.out, '--once')).code).toBe(2);
  });

  it('watch --once: results on stdout, every unusable file on stderr in every pass, exit 4; the share is untouched', async () => {
    const here = place();
    putFile(here, 'half.jdx', '##TITLE=x\n');
    putFile(here, 'bad.jdx', corrupt);
    const share = hashTree(here.share);
    for (let turn = 0; turn < 2; turn += 1) {
      const ended = await once(here);
      expect(ended.code).toBe(4);
      expect(ended.stderr).toMatch(/error: BX-0417\/bad\.jdx: set-aside: .*\(code: jcamp-/);
      expect(ended.stderr).toMatch(/error: BX-0417\/half\.jdx: incomplete: .*\(code: incomplete\)/);
      expect(ended.stdout).toMatch(/^BX-0417: 0 time point files, [02] new, 2 not usable, ledger head \d+ [0-9a-f]{12}; /);
      // Nothing but lines fit for a journal when stderr is no terminal.
      expect(ended.stderr).not.toContain('\x1b');
    }
    expect(hashTree(here.share)).toEqual(share);
    expect(statSync(join(here.out, 'BX-0417', 'ledger.jsonl')).mode & 0o007).toBe(0);
  });

  it('watch: takes in what comes while it runs, and ends cleanly on SIGINT', async () => {
    const here = place();
    putFile(here, 'bad.jdx', corrupt);
    const running = start(process.execPath, [
      program,
      'watch',
      here.share,
      '--method',
      here.method,
      '--out',
      here.out,
      '--settle',
      '0.2',
      '--poll',
      '0.2',
    ]);
    await running.says('bad.jdx');
    putFile(here, 'worse.jdx', corrupt.replace('=x', '=y'));
    await running.says('worse.jdx');
    await pause(200);
    running.child.kill('SIGINT');
    const ended = await running.ended;
    expect(ended.code).toBe(130);
    expect(ended.stderr).toContain('every result that was acknowledged is in the record');
  });

  it('verify: exits 0 on a sound record, 3 with the first bad entry in words, 2 on no record', async () => {
    const here = place();
    putFile(here, 'bad.jdx', corrupt);
    await once(here);
    const folder = join(here.out, 'BX-0417');
    const sound = await run('verify', folder, '--share', here.share);
    expect([sound.code, sound.stdout]).toEqual([0, expect.stringMatching(/^BX-0417: verified; ledger head 3 [0-9a-f]{64}\n/)]);
    const before = hashTree(here.out);
    const ledger = join(folder, 'ledger.jsonl');
    writeFileSync(ledger, readFileSync(ledger, 'utf8').replace('bad.jdx', 'bed.jdx'));
    const damaged = await run('verify', folder);
    expect([damaged.code, damaged.stderr]).toEqual([3, expect.stringContaining('entry 3 of the ledger is damaged')]);
    expect((await once(here)).code).toBe(3);
    expect((await run('verify', join(here.out, 'none'))).code).toBe(2);
    expect(Object.keys(hashTree(here.out))).toEqual(Object.keys(before));
  });

  it('amend: needs one action, a name and a reason; says what was recorded', async () => {
    const here = place();
    putFile(here, 'bad.jdx', corrupt);
    await once(here);
    const folder = join(here.out, 'BX-0417');
    expect((await run('amend', folder, '--comment')).code).toBe(2);
    expect((await run('amend', folder, '--comment', '--restore', '--by', 'QA-2', '--because', 'x')).code).toBe(2);
    expect((await run('amend', folder, '--set-aside', '--by', 'QA-2', '--because', 'x')).code).toBe(2);
    expect((await run('amend', folder, '--comment', '--by', 'QA-2', '--because', ' ')).code).toBe(2);
    const done = await run('amend', folder, '--comment', '--by', 'QA-2', '--because', 'exported twice');
    expect([done.code, done.stdout]).toEqual([0, expect.stringMatching(/^recorded as entry \d+: comment by QA-2\n$/)]);
    expect((await run('verify', folder)).code).toBe(0);
  });

  it('doctor: changes nothing, has a line for everything and a fix for what is not well', async () => {
    const here = place();
    putFile(here, 'bad.jdx', corrupt);
    await once(here);
    const before = hashTree(here.root);
    const well = await run('doctor', here.share, '--out', here.out, '--method', here.method);
    expect([well.code, well.stderr]).toEqual([0, '']);
    for (const name of ['versions', 'fonts', 'clock', 'share', 'output', 'space', 'holder', 'ledger', 'method', 'site file'])
      expect(well.stdout).toMatch(new RegExp(`^(pass|warn)  ${name}`, 'm'));
    const ill = await run(
      'doctor',
      join(here.root, 'none'),
      '--out',
      here.share,
      '--method',
      join(here.root, 'none.yaml'),
      '--json',
    );
    const { findings } = JSON.parse(ill.stdout) as { findings: { state: string; fix?: string }[] };
    expect(ill.code).toBe(1);
    expect(findings.filter(({ state }) => state === 'fail').length).toBeGreaterThanOrEqual(2);
    expect(findings.filter(({ state }) => state !== 'pass').every(({ fix }) => (fix ?? '').length > 5)).toBe(true);
    expect(hashTree(here.root)).toEqual(before);
    mkdirSync(here.share, { recursive: true });
  });
});
