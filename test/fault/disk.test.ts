import { describe, expect, it } from 'vitest';
import { type Call, type Fault, faultAt, makeFaultyPort } from './faultyPort.js';
import { failures, lasting, ledgerOf, makeWorld, nightFiles, pass, verify, type World } from './world.js';

const files = nightFiles(3);

async function undisturbed() {
  const world = makeWorld(files);
  expect((await pass(world)).ok).toBe(true);
  return lasting(world.disk);
}

/** Runs the scenario for every call until the fault no longer fires; after each the record must come out whole. */
async function forEveryCall(fault: Fault, isPersistent: boolean): Promise<number> {
  const expected = await undisturbed();
  for (let n = 1; ; n += 1) {
    const world = makeWorld(files);
    const port = makeFaultyPort(world.disk.port, faultAt(n, fault, isPersistent));
    // An expected failure is a value: nothing may be thrown here.
    await pass(world, { port });
    const what = `call ${n} of ${port.calls.length}`;
    await expectWhole(world, expected, what);
    if (port.calls.length < n) return n - 1;
  }
}

async function expectWhole(world: World, expected: Record<string, string>, what: string) {
  const acknowledged = world.events.filter(({ kind }) => kind === 'taken').map(({ file }) => file);
  const kept = () =>
    ledgerOf(world)
      .filter(({ kind }) => kind === 'input')
      .map(({ file }) => file);
  expect(kept(), `${what}: acknowledged, and not there`).toEqual(expect.arrayContaining(acknowledged));
  const again = await pass(world);
  expect(again.ok ? again.value.problems : [again.problem], what).toEqual([]);
  expect(kept(), what).toEqual(expect.arrayContaining(acknowledged));
  expect(new Set(kept()).size, `${what}: counted twice`).toBe(kept().length);
  expect(failures(await verify(world)), what).toEqual([]);
  expect(lasting(world.disk), what).toEqual(expected);
  expect(world.disk.openCount(), `${what}: open files`).toBe(0);
}

const onLedgerWrite = (act: (count: number) => Fault | undefined) => {
  let count = 0;
  return ({ operation, path }: Call): Fault | undefined =>
    operation === 'write' && path.endsWith('ledger.jsonl') ? act(++count) : undefined;
};

describe('an output disk that fails', () => {
  it('F09 F13: with ENOSPC, EIO or EFBIG at every call, once and from there on, loses and repeats nothing', {
    timeout: 240_000,
  }, async () => {
    let faults = 0;
    for (const code of ['ENOSPC', 'EIO']) {
      for (const isPersistent of [false, true]) faults += await forEveryCall({ kind: 'fail', code }, isPersistent);
    }
    expect(faults).toBeGreaterThan(400);
  });

  it('F09: full in the middle of a ledger line acknowledges nothing, says so, and goes on when there is space', async () => {
    for (const bytes of [0, 1, 40, 200]) {
      const expected = await undisturbed();
      const world = makeWorld(files);
      const plan = onLedgerWrite((count) => (count >= 2 ? { kind: 'short', bytes, code: 'ENOSPC' } : undefined));
      const summary = await pass(world, { port: makeFaultyPort(world.disk.port, plan) });
      expect(summary.ok && summary.value.problems.map(({ code }) => code)).toEqual(['disk-full']);
      expect(world.events.filter(({ kind }) => kind === 'taken')).toEqual([]);
      await expectWhole(world, expected, `${bytes} bytes`);
    }
  });

  it('F10: full while the report is written leaves no part of it under its name and keeps the result', async () => {
    const expected = await undisturbed();
    const world = makeWorld(files);
    let isFull = false;
    const plan = ({ operation, path }: Call): Fault | undefined => {
      if (operation === 'rename' && path.endsWith('series.csv')) isFull = true;
      return isFull && operation === 'write' && !path.endsWith('ledger.jsonl')
        ? { kind: 'short', bytes: 3, code: 'ENOSPC' }
        : undefined;
    };
    const summary = await pass(world, { port: makeFaultyPort(world.disk.port, plan) });
    expect(summary.ok && [...new Set(summary.value.problems.map(({ code }) => code))]).toEqual(['disk-full']);
    expect(world.disk.files().has('/out/BX-0417/report.html')).toBe(false);
    expect(ledgerOf(world).filter(({ kind }) => kind === 'input')).toHaveLength(3);
    await expectWhole(world, expected, 'report');
    expect(world.disk.files().has('/out/BX-0417/report.html')).toBe(true);
  });

  it('F11: writes that take fewer bytes are continued; a write that loses bytes in silence is found by the size', async () => {
    const expected = await undisturbed();
    const short = makeWorld(files);
    const summary = await pass(short, {
      port: makeFaultyPort(short.disk.port, ({ operation }) => (operation === 'write' ? { kind: 'short', bytes: 7 } : undefined)),
    });
    expect(summary.ok && summary.value.problems).toEqual([]);
    expect(lasting(short.disk)).toEqual(expected);
    let lies = 0;
    for (let n = 1; ; n += 1) {
      const world = makeWorld(files);
      let writes = 0;
      const plan = ({ operation }: Call): Fault | undefined =>
        operation === 'write' && ++writes === n ? { kind: 'lie', lost: 2 } : undefined;
      await pass(world, { port: makeFaultyPort(world.disk.port, plan) });
      if (writes < n) break;
      lies += 1;
      await expectWhole(world, expected, `write ${n} loses bytes`);
    }
    expect(lies).toBeGreaterThan(15);
  });

  it('F13: an EIO on the sync of the ledger is never followed by a sync of the same descriptor', async () => {
    const world = makeWorld(files);
    let opened = 0;
    let failedIn = 0;
    const synced: number[] = [];
    const port = makeFaultyPort(world.disk.port, ({ operation, path }) => {
      if (!path.endsWith('ledger.jsonl')) return undefined;
      if (operation === 'open') opened += 1;
      if (operation !== 'dataSync') return undefined;
      synced.push(opened);
      if (synced.length !== 4) return undefined;
      failedIn = opened;
      return { kind: 'fail', code: 'EIO' };
    });
    await pass(world, { port });
    expect(failedIn).toBeGreaterThan(0);
    expect(synced.slice(4).every((descriptor) => descriptor > failedIn)).toBe(true);
    await expectWhole(world, await undisturbed(), 'after the failed sync');
  });

  it('F16: read-only is refused at the start, and verify still works', async () => {
    const world = makeWorld(files);
    await pass(world);
    const writing = new Set(['makeFolder', 'link', 'unlink', 'rename', 'write', 'truncate']);
    const plan = ({ operation, path }: Call): Fault | undefined =>
      writing.has(operation) || (operation === 'open' && /\.new-/.test(path)) ? { kind: 'fail', code: 'EROFS' } : undefined;
    const refused = await pass(world, { port: makeFaultyPort(world.disk.port, plan) });
    expect(refused).toMatchObject({ ok: false, problem: { code: 'output-not-writable' } });
    expect(!refused.ok && refused.problem.message).toMatch(/EROFS/);
    expect(failures(await verify(world))).toEqual([]);
  });

  it('F17: without file descriptors for a while loses nothing and leaves none open', async () => {
    const expected = await undisturbed();
    for (const isPersistent of [false, true]) {
      for (let n = 1; n < 200; n += 7) {
        const world = makeWorld(files);
        let opens = 0;
        const plan = ({ operation }: Call): Fault | undefined => {
          if (operation !== 'open') return undefined;
          opens += 1;
          return opens === n || (isPersistent && opens > n) ? { kind: 'fail', code: 'EMFILE' } : undefined;
        };
        await pass(world, { port: makeFaultyPort(world.disk.port, plan) });
        await expectWhole(world, expected, `open ${n}`);
      }
    }
  });

  it('F74: nearly full or without free inodes warns early and stops before the ledger is at risk', async () => {
    const { readSpace } = await import('../../src/watch/diskSpace.js');
    const world = makeWorld();
    const look = async (space: Parameters<typeof world.disk.setSpace>[0]) => {
      world.disk.setSpace({ freeBytes: 1e12, freeInodes: 1e9, inodes: 2e9, ...space });
      const found = await readSpace(world.disk.port, '/');
      return found.ok ? { stop: found.value.stop?.code, warnings: found.value.warnings.length } : undefined;
    };
    expect(await look({})).toEqual({ stop: undefined, warnings: 0 });
    expect(await look({ freeBytes: 100 * 2 ** 20 })).toEqual({ stop: undefined, warnings: 1 });
    expect(await look({ freeBytes: 2 ** 20 })).toEqual({ stop: 'disk-full', warnings: 1 });
    expect(await look({ freeInodes: 50 })).toEqual({ stop: 'disk-full', warnings: 1 });
    expect(await look({ inodes: 0, freeInodes: 0 })).toEqual({ stop: undefined, warnings: 0 });
  });
});
