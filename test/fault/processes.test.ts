import { execFileSync, spawnSync } from 'node:child_process';
import { chmodSync, existsSync, mkdirSync, readFileSync, writeFileSync } from 'node:fs';
import { join } from 'node:path';
import { afterEach, describe, expect, it } from 'vitest';
import { makeKillable } from '../../src/watch/killableProcess.js';
import { makeMeasurePool } from '../../src/watch/measurePool.js';
import { feedRounds } from './feedRounds.js';
import { killRounds } from './killRounds.js';
import {
  driver,
  lastingIn,
  ledgerIn,
  makePlace,
  type Place,
  pause,
  program,
  putFile,
  putPoints,
  start,
  startDriver,
  verifyIn,
  watchOnceIn,
} from './processes.js';

const places: Place[] = [];
function place(): Place {
  const made = makePlace();
  places.push(made);
  return made;
}
afterEach(() => {
  for (const made of places.splice(0)) made.remove();
});

/** Mounting needs a name space of one's own; where that is not allowed the drill of DEVELOPERS.md replaces the test. */
const canMount = spawnSync('unshare', ['-Urm', 'true']).status === 0;

describe('real processes', () => {
  it('F01: killed at random times again and again ends as an undisturbed run', { timeout: 180_000 }, async () => {
    const seed = 20270115;
    const figures = await killRounds(25, seed);
    expect(figures).toMatchObject({ lost: 0, duplicated: 0, differing: 0, verifyFailures: [], shareChanged: false });
    expect(figures.kills, `seed ${seed}`).toBeGreaterThan(10);
  });

  for (const [signal, code] of [
    ['SIGTERM', 143],
    ['SIGINT', 130],
  ] as const) {
    it(`F06: ${signal} finishes the step, releases the lock and exits ${code} within 5 s`, { timeout: 60_000 }, async () => {
      const here = place();
      putPoints(here, 0, 30);
      const running = startDriver({ ...here, once: false, measureMs: 100 });
      await running.says('taken');
      const began = performance.now();
      running.child.kill(signal);
      const ended = await running.ended;
      expect(ended.code).toBe(code);
      expect(performance.now() - began).toBeLessThan(5000);
      expect(existsSync(join(here.out, '.held-by'))).toBe(false);
      expect(existsSync(join(here.out, 'BX-0417', '.held-by'))).toBe(false);
      expect((await verifyIn(here)).failed).toEqual([]);
    });
  }

  it('F06: a second signal ends at once', { timeout: 60_000 }, async () => {
    const here = place();
    putPoints(here, 0, 5);
    const running = startDriver({ ...here, once: false, measureMs: 20_000 });
    await running.says('ready');
    await pause(700);
    running.child.kill('SIGTERM');
    await running.says('again to stop at once');
    const began = performance.now();
    running.child.kill('SIGTERM');
    expect((await running.ended).code).toBe(143);
    expect(performance.now() - began).toBeLessThan(1500);
    expect((await watchOnceIn(here)).code).toBe(0);
    expect((await verifyIn(here)).failed).toEqual([]);
  });

  it('F07: a worker that exhausts its memory dies alone; the others go on', { timeout: 60_000 }, async () => {
    const module = new URL('./hungryWorker.js', import.meta.url);
    const pool = makeMeasurePool({ workers: 2, timeoutMs: 30_000, heapMegabytes: 64, module });
    const task = (fileName: string) => ({ bytes: new Uint8Array(10), fileName, methodText: '', methodFile: '' });
    const outcomes = await Promise.all(['a', 'hungry', 'b', 'c'].map((name) => pool.measure(task(name))));
    await pool.close();
    expect(outcomes.map(({ kind }) => kind)).toEqual(['measured', 'died', 'measured', 'measured']);
    expect(outcomes[1]).toMatchObject({ message: expect.stringContaining('memory') });
  });

  it('F21: a reader that hangs is killed after its time and started again; nothing else waits', { timeout: 30_000 }, async () => {
    const worker = makeKillable({ module: new URL('./hungryWorker.js', import.meta.url) });
    let beats = 0;
    const heart = setInterval(() => {
      beats += 1;
    }, 20);
    const hung = await worker.ask({ fileName: 'hang' }, 1500);
    clearInterval(heart);
    expect(hung).toMatchObject({ died: expect.stringContaining('no answer') });
    expect(beats).toBeGreaterThan(20);
    expect(await worker.ask({ fileName: 'a' }, 10_000)).toMatchObject({ answer: { kind: 'measured' } });
    await worker.close();
  });

  it('F40: a real pipe named like a spectrum is refused without waiting', { timeout: 60_000 }, async () => {
    const here = place();
    putPoints(here, 0, 2);
    execFileSync('mkfifo', [join(here.share, 'BX-0417', 'pipe.jdx')]);
    const ended = await watchOnceIn(here);
    expect(ended.code).toBe(4);
    expect(ended.milliseconds).toBeLessThan(20_000);
    expect(ledgerIn(here.out).find(({ file }) => file === 'pipe.jdx')).toMatchObject({ state: 'set-aside' });
  });

  it('F12: a limit of file size comes back as a full disk, not as the end of the process', { timeout: 60_000 }, async () => {
    const here = place();
    putPoints(here, 0, 40);
    const limited = await start('bash', ['-c', 'ulimit -f 4; exec "$@"', 'bash', process.execPath, driver, JSON.stringify(here)])
      .ended;
    expect(limited.signal).toBeNull();
    expect(limited.code).toBe(7);
    expect(limited.stderr).toContain('EFBIG');
    expect((await watchOnceIn(here)).code).toBe(0);
    expect((await verifyIn(here)).failed).toEqual([]);
  });

  it('F17: with few file descriptors nothing is lost', { timeout: 60_000 }, async () => {
    const here = place();
    putPoints(here, 0, 60);
    const limited = await start('bash', ['-c', 'ulimit -n 40; exec "$@"', 'bash', process.execPath, driver, JSON.stringify(here)])
      .ended;
    expect(limited.signal, limited.stderr).toBeNull();
    expect((await watchOnceIn(here)).code).toBe(0);
    expect((await verifyIn(here)).failed).toEqual([]);
    expect(ledgerIn(here.out).filter(({ kind }) => kind === 'input')).toHaveLength(60);
  });

  it.skipIf(process.getuid?.() !== 0)(
    'F15: an output folder that may not be written is refused with its path and the user id',
    { timeout: 60_000 },
    async () => {
      const here = place();
      putPoints(here, 0, 1);
      mkdirSync(here.out);
      chmodSync(here.root, 0o755);
      const ended = await start(process.execPath, [driver, JSON.stringify(here)], { uid: 65534 }).ended;
      expect(ended.code).toBe(2);
      expect(ended.stderr).toMatch(/output-not-writable: .*out.* by user id 65534 \(EACCES\)/);
    },
  );

  it.skipIf(!canMount)(
    'F09 F10 F16: a full disk exits 7, goes on when there is space, and a read-only one is refused but verifies',
    { timeout: 120_000 },
    async () => {
      const here = place();
      putPoints(here, 0, 60);
      mkdirSync(here.out);
      const once = `"${process.execPath}" "${driver}" '${JSON.stringify(here)}'`;
      const check = `"${process.execPath}" "${driver}" '${JSON.stringify({ verify: join(here.out, 'BX-0417') })}' >/dev/null`;
      const script = [
        `mount -t tmpfs -o size=3m tmpfs "${here.out}"`,
        `dd if=/dev/zero of="${here.out}/filler" bs=1k count=2850 2>/dev/null`,
        `${once}; echo full=$?`,
        `${check}; echo afterfull=$?`,
        `rm "${here.out}/filler"; ${once}; echo space=$?`,
        `${check}; echo afterspace=$?`,
        `mount -o remount,ro "${here.out}"; ${once}; echo readonly=$?`,
        `${check}; echo afterreadonly=$?`,
      ].join('\n');
      const ended = await start('unshare', ['-Urm', 'bash', '-c', script]).ended;
      expect(ended.stdout.trim().split('\n'), ended.stderr.slice(-2000)).toEqual([
        'full=7',
        'afterfull=0',
        'space=0',
        'afterspace=0',
        'readonly=2',
        'afterreadonly=0',
      ]);
    },
  );

  it('F59: of two watchers on one output folder the second exits 5 and names the first', { timeout: 180_000 }, async () => {
    const here = place();
    putPoints(here, 0, 3);
    const first = startDriver({ ...here, once: false });
    await first.says('ready');
    const second = await watchOnceIn(here);
    expect(second.code).toBe(5);
    expect(second.stderr).toMatch(new RegExp(`record-held: .*process ${first.child.pid} of .* since \\d{4}-`));
    first.child.kill('SIGTERM');
    await first.ended;
    const rounds = 8;
    for (let round = 0; round < rounds; round += 1) {
      putPoints(here, 3 + 2 * round, 5 + 2 * round);
      const both = await Promise.all([watchOnceIn(here), watchOnceIn(here)]);
      expect(
        both.map(({ code }) => code).every((code) => code === 0 || code === 5),
        JSON.stringify(both),
      ).toBe(true);
      expect(both.some(({ code }) => code === 0)).toBe(true);
    }
    expect((await verifyIn(here)).failed).toEqual([]);
    expect(ledgerIn(here.out).filter(({ kind }) => kind === 'input')).toHaveLength(3 + 2 * rounds);
  });

  it('F60: two watchers of one share with two output folders are both right', { timeout: 60_000 }, async () => {
    const here = place();
    putPoints(here, 0, 10);
    const other = { ...here, out: join(here.root, 'other') };
    const both = await Promise.all([watchOnceIn(here), watchOnceIn(other)]);
    expect(both.map(({ code }) => code)).toEqual([0, 0]);
    expect(lastingIn(here.out)).toEqual(lastingIn(other.out));
  });

  it('F61: the lock of a killed process is taken over; one of another machine, or of a live process, is respected', {
    timeout: 60_000,
  }, async () => {
    const here = place();
    putPoints(here, 0, 30);
    const killed = startDriver({ ...here, once: false, measureMs: 50 });
    await killed.says('taken');
    killed.child.kill('SIGKILL');
    await killed.ended;
    const lock = join(here.out, '.held-by');
    const holder = JSON.parse(readFileSync(lock, 'utf8')) as Record<string, unknown>;
    expect((await watchOnceIn(here)).code).toBe(0);
    expect(ledgerIn(here.out).some(({ name }) => name === 'takeover')).toBe(true);
    const cases: [object, number][] = [
      [{ ...holder, host: 'elsewhere' }, 5],
      [{ ...holder, pid: process.pid, startTicks: undefined }, 5],
      [{ ...holder, pid: process.pid }, 0],
      [{ ...holder, pid: process.pid, bootId: 'another start of the machine' }, 0],
    ];
    for (const [fake, code] of cases) {
      writeFileSync(lock, JSON.stringify(fake));
      expect((await watchOnceIn(here)).code, JSON.stringify(fake)).toBe(code);
    }
    writeFileSync(lock, 'rubbish');
    expect((await watchOnceIn(here)).code).toBe(5);
  });

  it('F62: a real watcher that is stopped, overtaken and woken ends by the fence', { timeout: 60_000 }, async () => {
    const here = place();
    putPoints(here, 0, 40);
    const paused = startDriver({ ...here, once: false, measureMs: 60 });
    await paused.says('taken');
    paused.child.kill('SIGSTOP');
    const gone = { host: '', pid: 1 };
    for (const lock of [join(here.out, '.held-by'), join(here.out, 'BX-0417', '.held-by')]) {
      if (!existsSync(lock)) continue;
      const holder = JSON.parse(readFileSync(lock, 'utf8')) as Record<string, unknown>;
      writeFileSync(lock, JSON.stringify({ ...holder, ...gone, host: holder.host, startTicks: '1' }));
    }
    expect((await watchOnceIn(here)).code).toBe(0);
    const lines = ledgerIn(here.out).length;
    paused.child.kill('SIGCONT');
    await pause(1500);
    paused.child.kill('SIGTERM');
    await paused.ended;
    expect(ledgerIn(here.out)).toHaveLength(lines);
    expect((await verifyIn(here)).failed).toEqual([]);
  });

  it('a clean clone of the command: one pass of the program itself over a run of real files, then nothing new', {
    timeout: 120_000,
  }, async () => {
    const here = place();
    putFile(here, 'half.jdx', '##TITLE=half\n');
    const args = ['watch', here.share, '--method', here.method, '--out', here.out, '--once', '--json'];
    const first = await start(process.execPath, [program, ...args]).ended;
    expect(first.code, first.stderr).toBe(4);
    expect(first.stderr).toMatch(/half\.jdx: incomplete/);
    const again = await start(process.execPath, [program, ...args]).ended;
    expect(again.code).toBe(4);
    expect(again.stdout).toBe(first.stdout.replace('"taken": 1', '"taken": 0'));
  });
});

describe('a night of a user', () => {
  it('fed slowly, in bursts and out of order while the watcher is killed, ends as a quiet pass', {
    timeout: 120_000,
  }, async () => {
    const figures = await feedRounds(60, 8, 7, 6000);
    expect(figures).toMatchObject({ lost: 0, duplicated: 0, differing: 0, verifyFailures: [], shareChanged: false });
    expect(figures.kills).toBeGreaterThanOrEqual(8);
  });
});
