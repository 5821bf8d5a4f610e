import { describe, expect, it } from 'vitest';
import type { FilePort } from '../../src/record/filePort.js';
import { watchShare } from '../../src/watch/watchShare.js';
import { makeFaultyPort } from './faultyPort.js';
import {
  failures,
  jcamp,
  ledgerOf,
  makeWorld,
  minutesLater,
  nightFiles,
  open,
  out,
  startMs,
  verify,
  type World,
} from './world.js';

const old = startMs - 1e6;

/** Watches for a number of turns; `atTurn` changes the world before each. */
async function watchTurns(world: World, turns: number, atTurn: (turn: number) => void, sharePort?: FilePort) {
  const controller = new AbortController();
  const opened = await open(world, {
    signal: controller.signal,
    ...(sharePort !== undefined ? { sharePort } : {}),
    settings: { isOnce: false, pollMs: 20_000, settleMs: 30_000, longestWaitMs: 900_000 },
  });
  if (!opened.ok) throw new Error(opened.problem.message);
  let turn = 0;
  const sleep = world.clock.sleep;
  world.clock.sleep = async (milliseconds, signal) => {
    await sleep(milliseconds, signal);
    turn += 1;
    if (turn >= turns) controller.abort();
    else atTurn(turn);
  };
  await watchShare(opened.value.session);
  await opened.value.close();
  world.clock.sleep = sleep;
}

const inputs = (world: World) => ledgerOf(world).filter(({ kind }) => kind === 'input');
const told = (world: World, kind: string) => world.events.filter((event) => event.kind === kind);

describe('a watch through the night', () => {
  it('takes files in once they have been quiet for the settle time, by the monotonic clock', async () => {
    const world = makeWorld(nightFiles(2));
    await watchTurns(world, 3, () => undefined);
    expect(inputs(world)).toHaveLength(2);
    expect(world.clock.sleeps[0]).toBe(20_000);
    expect(inputs(world)[0]?.at).not.toBe(new Date(startMs).toISOString());
  });

  it('F28: an unfinished file waits, says what for, and is set down as incomplete only after the longest wait', async () => {
    const world = makeWorld({ 'BX-0417/half.jdx': '##TITLE=half\n' });
    await watchTurns(world, 20, () => undefined);
    expect(inputs(world)).toEqual([]);
    expect(told(world, 'waiting')[0]?.message).toMatch(/##END=/);
    await watchTurns(world, 60, (turn) => {
      if (turn === 55) world.disk.write('/share/BX-0417/half.jdx', jcamp('half'), old);
    });
    expect(inputs(world).map(({ state }) => state)).toEqual(['incomplete', 'measured']);
  });

  it('an unfinished file is not read again until it changes', async () => {
    const world = makeWorld({ 'BX-0417/half.jdx': '##TITLE=half\n' });
    const port = makeFaultyPort(world.disk.port, () => undefined);
    await watchTurns(world, 20, () => undefined, port);
    expect(port.calls.filter(({ operation, path }) => operation === 'open' && path.endsWith('half.jdx'))).toHaveLength(1);
  });

  it('F20: a share that goes and comes back gives one line each, a longer and longer wait, and one outage in the record', async () => {
    const world = makeWorld(nightFiles(2));
    const before = 4;
    await watchTurns(world, 30, (turn) => {
      if (turn === before) world.disk.move('/share', '/elsewhere');
      if (turn === 14) {
        world.disk.move('/elsewhere', '/share');
        world.disk.write('/share/BX-0417/after.jdx', jcamp('after', minutesLater(400)), old);
      }
    });
    expect(told(world, 'share-away')).toHaveLength(1);
    expect(told(world, 'share-back')).toHaveLength(1);
    const sleeps = world.clock.sleeps.slice(before, 14);
    expect(sleeps).toEqual([...sleeps].sort((a, b) => a - b));
    expect(Math.max(...sleeps)).toBe(300_000);
    expect(ledgerOf(world).filter(({ name }) => name === 'outage')).toMatchObject([
      { seconds: expect.any(Number), sinceUtc: expect.any(String) },
    ]);
    expect(ledgerOf(world).filter(({ name }) => name === 'gone')).toEqual([]);
    expect(inputs(world)).toHaveLength(3);
  });

  it('F19: an empty mount point in the middle of the night concludes nothing about any file', async () => {
    const world = makeWorld(nightFiles(2));
    await watchTurns(world, 12, (turn) => {
      if (turn === 4) {
        world.disk.move('/share', '/elsewhere');
        world.disk.makeFolders('/share');
      }
      if (turn === 8) {
        world.disk.remove('/share');
        world.disk.move('/elsewhere', '/share');
      }
    });
    expect(told(world, 'share-away')).toHaveLength(1);
    expect(ledgerOf(world).filter(({ name }) => name === 'gone')).toEqual([]);
  });

  it('F47: jumps of the wall clock change neither order nor waiting, are recorded once, and lose no lock', async () => {
    const world = makeWorld(nightFiles(1));
    await watchTurns(world, 14, (turn) => {
      if (turn === 4) world.clock.jump(-3_600_000);
      if (turn === 6) world.disk.write('/share/BX-0417/tp-001.jdx', jcamp('later', minutesLater(10)), old);
      if (turn === 9) world.clock.jump(86_400_000);
      if (turn === 11) world.clock.jump(-world.clock.nowMs());
    });
    expect(
      ledgerOf(world)
        .filter(({ name }) => name === 'clock-jump')
        .map(({ seconds }) => seconds),
    ).toEqual([-3600, 86_400, expect.any(Number)]);
    expect(ledgerOf(world).map(({ seq }) => seq)).toEqual(ledgerOf(world).map((_, index) => index + 1));
    expect(inputs(world)).toHaveLength(2);
    expect(world.clock.sleeps.every((ms) => ms >= 50 && ms <= 20_000)).toBe(true);
    expect(ledgerOf(world).every(({ at, utcOffsetMin }) => /Z$/.test(String(at)) && utcOffsetMin === 60)).toBe(true);
    expect(failures(await verify(world))).toEqual([]);
  });

  it('F09: a disk that is full holds the watch up, says so once, and it goes on by itself', async () => {
    const world = makeWorld(nightFiles(2));
    world.disk.setSpace({ freeBytes: 1000 });
    await watchTurns(world, 10, (turn) => {
      if (turn === 6) world.disk.setSpace({ freeBytes: 1e12 });
    });
    expect(told(world, 'problem').map(({ problem }) => problem?.code)).toEqual(['disk-full']);
    expect(inputs(world)).toHaveLength(2);
  });

  it('new runs and new files are found while it runs, and a problem of one run is told once', async () => {
    const world = makeWorld(nightFiles(1));
    await watchTurns(world, 12, (turn) => {
      if (turn !== 3) return;
      world.disk.write('/share/BX-0500/tp-000.jdx', jcamp('other run'), old);
      world.disk.write('/share/BX-0600/tp-000.jdx', jcamp('bad run file'), old);
      world.disk.write('/share/BX-0600/run.yaml', 'kinetrail: run/1\nbatsh: x\n', old);
    });
    expect(ledgerOf(world, 'BX-0500').filter(({ kind }) => kind === 'input')).toHaveLength(1);
    expect(world.disk.files().has(`${out}/BX-0600/ledger.jsonl`)).toBe(false);
    expect(told(world, 'problem')).toHaveLength(1);
    expect(told(world, 'problem')[0]?.run).toBe('BX-0600');
  });
});
