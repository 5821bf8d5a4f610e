import { describe, expect, it } from 'vitest';
import { sha256 } from '../../src/base/sha256.js';
import { makeFaultyPort } from './faultyPort.js';
import {
  failures,
  jcamp,
  lasting,
  ledgerOf,
  makeWorld,
  minutesLater,
  nightFiles,
  open,
  out,
  pass,
  startMs,
  verify,
  type World,
} from './world.js';

const files = nightFiles(3);
const old = startMs - 1e6;

const inputsOf = (world: World, run?: string) => ledgerOf(world, run).filter(({ kind }) => kind === 'input');
const fateOf = (world: World, file: string) => inputsOf(world).findLast((entry) => entry.file === file);
const series = (world: World, run = 'BX-0417') =>
  JSON.parse(world.disk.files().get(`${out}/${run}/series.json`)!.toString('utf8')) as {
    points: { file: string; flags: { code: string }[] }[];
    inputs: { file: string; status: string; flags: { code: string; message: string }[] }[];
  };
const exceptions = (world: World, name: string) =>
  ledgerOf(world).filter((entry) => entry.kind === 'exception' && entry.name === name);

function failOn(world: World, operation: string, pathEnd: string, code: string, times = Number.POSITIVE_INFINITY) {
  let count = 0;
  return makeFaultyPort(world.disk.port, (call) =>
    call.operation === operation && call.path.endsWith(pathEnd) && ++count <= times ? { kind: 'fail', code } : undefined,
  );
}

describe('files that cannot be read', () => {
  it('F14: an EIO on reading makes the file visibly unreadable, never processed, and it is read when the fault is gone', async () => {
    const world = makeWorld(files);
    const summary = await pass(world, { sharePort: failOn(world, 'read', 'tp-001.jdx', 'EIO') });
    expect(summary.ok && summary.value.runs[0]?.unread).toMatchObject([
      { file: 'tp-001.jdx', status: 'set-aside', code: 'unreadable' },
    ]);
    expect(series(world).points.map(({ file }) => file)).toEqual(['tp-000.jdx', 'tp-002.jdx']);
    const lines = ledgerOf(world).length;
    await pass(world, { sharePort: failOn(world, 'read', 'tp-001.jdx', 'EIO') });
    expect(ledgerOf(world)).toHaveLength(lines);
    await pass(world);
    expect(series(world).points).toHaveLength(3);
    expect(series(world).inputs).toEqual([]);
  });

  it('F15: no permission for one input is visible and the rest goes on', async () => {
    const world = makeWorld(files);
    const summary = await pass(world, { sharePort: failOn(world, 'open', 'tp-001.jdx', 'EACCES') });
    expect(summary.ok && summary.value.runs[0]?.unread).toMatchObject([{ file: 'tp-001.jdx', code: 'unreadable' }]);
    expect(fateOf(world, 'tp-001.jdx')?.flags).toMatchObject([{ message: expect.stringContaining('EACCES') }]);
    expect(series(world).points).toHaveLength(2);
  });

  it('F26: busy for a while is taken in later', async () => {
    const world = makeWorld(files);
    for (const code of ['EBUSY', 'EAGAIN']) await pass(world, { sharePort: failOn(world, 'open', 'tp-002.jdx', code) });
    expect(series(world).points).toHaveLength(2);
    await pass(world);
    expect(series(world).points).toHaveLength(3);
  });

  it('F48: a corrupt file is set aside with its reason and captured; the others go on', async () => {
    const world = makeWorld({ ...files, 'BX-0417/tp-001.jdx': jcamp('corrupt') });
    await pass(world);
    expect(fateOf(world, 'tp-001.jdx')).toMatchObject({ state: 'set-aside', flags: [{ code: 'jcamp-check-ordinate' }] });
    expect(world.disk.files().has(`${out}/BX-0417/raw/${String(fateOf(world, 'tp-001.jdx')?.sha256)}.gz`)).toBe(true);
    expect(failures(await verify(world))).toEqual([]);
  });

  it('F08: a bug that one file wakes sets that file aside, loudly; the others go on, and another version tries it again', async () => {
    const world = makeWorld({ ...files, 'BX-0417/tp-001.jdx': jcamp('fault') });
    const summary = await pass(world);
    expect(summary.ok && summary.value.runs[0]?.unread).toMatchObject([
      { file: 'tp-001.jdx', code: 'program-fault', message: expect.stringContaining('injected bug') },
    ]);
    expect(series(world).points).toHaveLength(2);
    const lines = ledgerOf(world).length;
    await pass(world);
    expect(ledgerOf(world)).toHaveLength(lines);
    await pass(world, {
      program: '0.2.0',
      measure: (task) => (task.fileName === 'tp-001.jdx' ? { ok: true, value: [] } : { ok: true, value: [] }),
    });
    expect(fateOf(world, 'tp-001.jdx')).toMatchObject({ state: 'measured', engine: '0.2.0' });
  });

  it('F50: a huge file is refused by its size, unread', async () => {
    const world = makeWorld(files);
    const port = makeFaultyPort(world.disk.port, () => undefined);
    const stat = port.stat;
    port.stat = async (path) => ({
      ...(await stat(path)),
      ...(String(path).endsWith('tp-001.jdx') ? { sizeBytes: 12 * 2 ** 30 } : {}),
    });
    await pass(world, { sharePort: port });
    expect(fateOf(world, 'tp-001.jdx')).toMatchObject({ state: 'set-aside', flags: [{ code: 'file-too-large' }] });
    expect(port.calls.some(({ operation, path }) => operation === 'open' && path.endsWith('tp-001.jdx'))).toBe(false);
  });

  it('F39 F40: links, pipes, devices and folders named like spectra are refused unopened and shown once', async () => {
    const world = makeWorld(files);
    world.disk.putLink(`/share/BX-0417/out.jdx`, '/etc/passwd');
    world.disk.putLink(`/share/BX-0417/loop.jdx`, '/share/BX-0417/loop.jdx');
    world.disk.putLink(`/share/BX-0417/dangling.jdx`, '/nowhere');
    world.disk.putOther(`/share/BX-0417/pipe.jdx`);
    world.disk.makeFolders('/share/BX-0417/folder.jdx');
    const port = makeFaultyPort(world.disk.port, () => undefined);
    await pass(world, { sharePort: port });
    for (const file of ['out.jdx', 'loop.jdx', 'dangling.jdx', 'pipe.jdx'])
      expect(fateOf(world, file)).toMatchObject({ state: 'set-aside', flags: [{ code: 'file-kind' }] });
    expect(fateOf(world, 'folder.jdx')).toBeUndefined();
    expect(
      port.calls.filter(({ operation, path }) => operation === 'open' && /(out|loop|dangling|pipe|folder)\.jdx$/.test(path)),
    ).toEqual([]);
    const lines = ledgerOf(world).length;
    await pass(world);
    expect(ledgerOf(world)).toHaveLength(lines);
  });
});

describe('files that are not at rest', () => {
  it('F27: a file that grows for minutes waits and gives one result at the end', async () => {
    const whole = jcamp('slow');
    let written = 0;
    const world = makeWorld(files, () => {
      if (written >= whole.length) return;
      written = Math.min(whole.length, written + 30);
      world.disk.write('/share/BX-0417/slow.jdx', whole.slice(0, written));
    });
    world.disk.write('/share/BX-0417/slow.jdx', '');
    await pass(world);
    expect(fateOf(world, 'slow.jdx')).toMatchObject({ state: 'incomplete', flags: [{ code: 'still-changing' }] });
    while (written < whole.length) world.clock.sleep(10_000);
    await pass(world);
    expect(inputsOf(world).filter(({ file, state }) => file === 'slow.jdx' && state === 'measured')).toHaveLength(1);
    expect(series(world).inputs).toEqual([]);
  });

  it('F28 F38: half written, header only or empty is incomplete, never a result, and is taken up again when it changes', async () => {
    const world = makeWorld({
      ...files,
      'BX-0417/half.jdx': jcamp('half').slice(0, 60),
      'BX-0417/empty.jdx': '',
      'BX-0417/header.jdx': '##TITLE=x\n',
    });
    const summary = await pass(world);
    expect(summary.ok && summary.value.runs[0]?.unread.map(({ file, status }) => `${file} ${status}`)).toEqual([
      'empty.jdx incomplete',
      'half.jdx incomplete',
      'header.jdx incomplete',
    ]);
    expect(series(world).inputs.map(({ file, status }) => `${file} ${status}`)).toEqual([
      'empty.jdx incomplete',
      'half.jdx incomplete',
      'header.jdx incomplete',
    ]);
    expect(series(world).points).toHaveLength(3);
    world.disk.write('/share/BX-0417/half.jdx', jcamp('half'), old + 5000);
    await pass(world);
    expect(series(world).points).toHaveLength(4);
    expect(series(world).inputs).toHaveLength(2);
    expect(failures(await verify(world))).toEqual([]);
  });

  it('F29: preallocated to its full size and filled later is not taken before it is filled', async () => {
    const whole = jcamp('filled');
    const world = makeWorld({ ...files, 'BX-0417/filled.jdx': '\0'.repeat(whole.length) });
    await pass(world);
    expect(fateOf(world, 'filled.jdx')?.state).toBe('incomplete');
    world.disk.write('/share/BX-0417/filled.jdx', whole, old + 9000);
    await pass(world);
    expect(fateOf(world, 'filled.jdx')?.state).toBe('measured');
  });

  it('F30: temporary and hidden names are passed over; the final name is taken once', async () => {
    const world = makeWorld(files);
    for (const name of ['.tp-9.jdx', '~tp-9.jdx', 'tp-9.jdx.part', 'tp-9.jdx.tmp', '._tp-9.jdx'])
      world.disk.write(`/share/BX-0417/${name}`, jcamp('temporary'), old);
    await pass(world);
    expect(inputsOf(world)).toHaveLength(3);
    world.disk.move('/share/BX-0417/tp-9.jdx.part', '/share/BX-0417/tp-9.jdx');
    await pass(world);
    expect(inputsOf(world)).toHaveLength(4);
  });

  it('F32: changed while it is read goes back to waiting', async () => {
    const world = makeWorld(files);
    let reads = 0;
    const sharePort = makeFaultyPort(world.disk.port, ({ operation, path }) => {
      if (operation !== 'read' || !path.endsWith('tp-001.jdx') || ++reads !== 3) return undefined;
      return { kind: 'meanwhile', act: () => world.disk.write('/share/BX-0417/tp-001.jdx', jcamp('changed in between'), old) };
    });
    await pass(world, { sharePort });
    expect(fateOf(world, 'tp-001.jdx')).toMatchObject({ state: 'incomplete' });
    await pass(world);
    expect(fateOf(world, 'tp-001.jdx')).toMatchObject({ state: 'measured' });
    expect(inputsOf(world).filter(({ state }) => state === 'measured')).toHaveLength(3);
  });

  it('F32: other bytes of the same size and time, put there between the two readings, are found by the hash', async () => {
    const world = makeWorld(files);
    const before = files['BX-0417/tp-001.jdx']!;
    const after = before.replace('point 1', 'point X');
    let reads = 0;
    const sharePort = makeFaultyPort(world.disk.port, ({ operation, path }) => {
      if (operation !== 'read' || !path.endsWith('tp-001.jdx') || ++reads !== 3) return undefined;
      return { kind: 'meanwhile', act: () => world.disk.write('/share/BX-0417/tp-001.jdx', after, old) };
    });
    await pass(world, { sharePort });
    await pass(world);
    const hashes = inputsOf(world).flatMap(({ file, sha256: hash }) =>
      file === 'tp-001.jdx' && hash !== undefined ? [hash] : [],
    );
    expect(hashes).toEqual([sha256(after)]);
  });

  it('F23: an old stat and late visibility only delay', async () => {
    const world = makeWorld(files);
    world.disk.write('/share/BX-0417/tp-003.jdx', jcamp('late to be seen', minutesLater(30)), old);
    const stale = makeFaultyPort(world.disk.port, ({ operation, path }) =>
      operation === 'stat' && path.endsWith('tp-003.jdx') ? { kind: 'fail', code: 'ENOENT' } : undefined,
    );
    await pass(world, { sharePort: stale });
    expect(inputsOf(world)).toHaveLength(3);
    const port = makeFaultyPort(world.disk.port, () => undefined);
    const { stat } = port;
    port.stat = async (path) => ({ ...(await stat(path)), ...(String(path).endsWith('tp-003.jdx') ? { sizeBytes: 5 } : {}) });
    await pass(world, { sharePort: port });
    expect(fateOf(world, 'tp-003.jdx')?.state).toBe('incomplete');
    await pass(world);
    expect(fateOf(world, 'tp-003.jdx')?.state).toBe('measured');
  });

  it('F24: a share clock hours ahead or behind changes nothing but the wait', async () => {
    const world = makeWorld();
    world.disk.write('/share/BX-0417/ahead.jdx', jcamp('ahead'), startMs + 5 * 3_600_000);
    world.disk.write('/share/BX-0417/behind.jdx', jcamp('behind'), startMs - 500 * 3_600_000);
    await pass(world);
    expect(inputsOf(world).map(({ file, state }) => `${file} ${state}`)).toEqual(['behind.jdx measured', 'ahead.jdx measured']);
    expect(world.clock.sleeps.reduce((sum, ms) => sum + ms, 0)).toBeLessThan(3000);
  });
});

describe('files that change their name, content or existence', () => {
  it('F31 F36: other bytes under the same name are kept, shown and wait for a decision; the first stands', async () => {
    const world = makeWorld(files);
    await pass(world);
    const before = lasting(world.disk);
    world.disk.write('/share/BX-0417/tp-001.jdx', jcamp('exported again', minutesLater(10)), old + 77);
    await pass(world);
    expect(world.events.some(({ kind, file }) => kind === 'replaced' && file === 'tp-001.jdx')).toBe(true);
    const after = lasting(world.disk);
    expect(after[`${out}/BX-0417/series.json`]).toBe(before[`${out}/BX-0417/series.json`]);
    expect(Object.keys(after).length).toBe(Object.keys(before).length + 2);
    const lines = ledgerOf(world).length;
    await pass(world);
    expect(ledgerOf(world)).toHaveLength(lines);
    expect(failures(await verify(world))).toEqual([]);
  });

  it('F33: gone before it could be captured is recorded as vanished', async () => {
    const world = makeWorld(files, () => world.disk.remove('/share/BX-0417/young.jdx'));
    world.disk.write('/share/BX-0417/young.jdx', jcamp('young'), startMs);
    await pass(world);
    expect(fateOf(world, 'young.jdx')).toMatchObject({ state: 'vanished' });
    expect(series(world).points).toHaveLength(3);
    expect(series(world).inputs).toEqual([]);
  });

  it('F34: deleted after it was measured keeps its result; a note says so once', async () => {
    const world = makeWorld(files);
    await pass(world);
    const before = lasting(world.disk);
    world.disk.remove('/share/BX-0417/tp-001.jdx');
    await pass(world);
    expect(lasting(world.disk)).toEqual(before);
    expect(exceptions(world, 'gone')).toMatchObject([{ files: ['tp-001.jdx'] }]);
    const lines = ledgerOf(world).length;
    await pass(world);
    expect(ledgerOf(world)).toHaveLength(lines);
  });

  it('F35: the same bytes under another name are a duplicate, measured once', async () => {
    let measured = 0;
    const world = makeWorld({ ...files, 'BX-0417/copy.jdx': files['BX-0417/tp-001.jdx']! });
    const { measureCheaply } = await import('./world.js');
    await pass(world, {
      measure: (task) => {
        measured += 1;
        return measureCheaply(task);
      },
    });
    expect(measured).toBe(3);
    expect(series(world).points.map(({ file }) => file)).toEqual(['tp-000.jdx', 'copy.jdx', 'tp-002.jdx']);
    expect(series(world).inputs).toMatchObject([{ file: 'tp-001.jdx', status: 'duplicate' }]);
  });

  it('F25: names that differ by case or by Unicode form are two files', async () => {
    const world = makeWorld();
    for (const name of ['tp.jdx', 'TP.JDX', 'caf\u00e9.jdx', 'cafe\u0301.jdx'])
      world.disk.write(`/share/BX-0417/${name}`, jcamp(name, minutesLater(name.length)), old);
    await pass(world);
    expect(inputsOf(world)).toHaveLength(4);
    expect(new Set(inputsOf(world).map(({ file }) => file)).size).toBe(4);
  });

  it('F41 F42 F57: hostile names and titles stay inside the output folder and are recorded as bytes', async () => {
    const world = makeWorld();
    const names = [
      Buffer.from('a\nb.jdx'),
      Buffer.from('\u202egnp.jdx'),
      Buffer.from(`${'x'.repeat(251)}.jdx`),
      Buffer.from([0xff, 0xfe, 0x2e, 0x6a, 0x64, 0x78]),
      Buffer.from('-rf.jdx'),
      Buffer.from('it\'s "quoted" $(x).jdx'),
      Buffer.from('__proto__.jdx'),
    ];
    for (const [index, name] of names.entries())
      world.disk.write(Buffer.concat([Buffer.from('/share/BX-0417/'), name]), jcamp('../../x', minutesLater(index)), old);
    const summary = await pass(world);
    expect(summary.ok && summary.value.problems).toEqual([]);
    expect(inputsOf(world).every(({ state }) => state === 'measured')).toBe(true);
    const written = inputsOf(world).map(({ file, fileBase64 }) =>
      (fileBase64 !== undefined ? Buffer.from(String(fileBase64), 'base64') : Buffer.from(String(file))).toString('hex'),
    );
    expect(written.sort()).toEqual(names.map((name) => name.toString('hex')).sort());
    expect(inputsOf(world).find(({ fileBase64 }) => fileBase64 !== undefined)?.file).toBe('\\xff\\xfe.jdx');
    const lines = ledgerOf(world).length;
    await pass(world);
    expect(ledgerOf(world)).toHaveLength(lines);
    for (const path of world.disk.files().keys())
      expect(path.startsWith(`${out}/`) || path.startsWith('/share/') || path.startsWith('/methods/')).toBe(true);
  });

  it('F44: every order of arrival gives the same series', async () => {
    const five = Object.entries(nightFiles(5));
    const whole = makeWorld(Object.fromEntries(five));
    await pass(whole);
    const expected = lasting(whole.disk);
    for (const order of permutations([0, 1, 2, 3, 4])) {
      const world = makeWorld();
      for (const index of order) {
        const [name, text] = five[index]!;
        world.disk.write(`/share/${name}`, text, old);
        await pass(world);
      }
      expect(lasting(world.disk)).toEqual(expected);
    }
  }, 60_000);

  it('F43: many files at the start go through in a stable order with few under way', async () => {
    const world = makeWorld(nightFiles(1000));
    let underWay = 0;
    let most = 0;
    const { measureCheaply } = await import('./world.js');
    await pass(world, {
      withReport: false,
      measure: async (task) => {
        underWay += 1;
        most = Math.max(most, underWay);
        await new Promise((resolve) => setImmediate(resolve));
        underWay -= 1;
        return measureCheaply(task);
      },
    });
    expect(most).toBeLessThanOrEqual(3);
    const names = inputsOf(world).map(({ file }) => file as string);
    expect(names).toHaveLength(1000);
    expect(names).toEqual([...names].sort());
  }, 60_000);
});

describe('a share that goes away', () => {
  it('F19: an empty mount point is a share that is away, not a share whose files were deleted', async () => {
    const world = makeWorld(files);
    await pass(world);
    const lines = ledgerOf(world).length;
    world.disk.move('/share', '/elsewhere');
    world.disk.makeFolders('/share');
    expect(await pass(world)).toMatchObject({ ok: false, problem: { code: 'share-away' } });
    expect(ledgerOf(world)).toHaveLength(lines);
  });

  it('F20: an error on listing one folder proves nothing about its files, and the others go on', async () => {
    const world = makeWorld({ ...files, ...nightFiles(2, 'BX-0500') });
    await pass(world);
    for (const code of ['ENOENT', 'ESTALE', 'ENOTCONN', 'EHOSTDOWN', 'EIO']) {
      world.disk.write(`/share/BX-0500/${code}.jdx`, jcamp(code), old);
      const summary = await pass(world, { sharePort: failOn(world, 'readFolder', 'BX-0417', code) });
      expect(summary.ok && summary.value.problems).toMatchObject([
        { code: 'share-away', message: expect.stringContaining(code) },
      ]);
    }
    expect(exceptions(world, 'gone')).toEqual([]);
    expect(inputsOf(world, 'BX-0500')).toHaveLength(7);
    for (const code of ['ENOENT', 'ESTALE', 'EIO'])
      expect(await pass(world, { sharePort: failOn(world, 'readFolder', '/share', code) })).toMatchObject({
        ok: false,
        problem: { code: 'share-away' },
      });
  });

  it('F22: after a remount with new inodes and times nothing is measured again and nothing is written twice', async () => {
    const world = makeWorld(files);
    await pass(world);
    const ledger = ledgerOf(world);
    for (const [name, text] of Object.entries(files)) {
      world.disk.remove(`/share/${name}`);
      world.disk.write(`/share/${name}`, text, old + 60_000);
    }
    let measured = 0;
    const { measureCheaply } = await import('./world.js');
    await pass(world, {
      measure: (task) => {
        measured += 1;
        return measureCheaply(task);
      },
    });
    expect(measured).toBe(0);
    expect(ledgerOf(world)).toEqual(ledger);
    const port = makeFaultyPort(world.disk.port, () => undefined);
    await pass(world, { sharePort: port });
    expect(port.calls.filter(({ operation, path }) => operation === 'open' && path.endsWith('.jdx'))).toEqual([]);
  });

  it('F72: an output folder inside the share, equal to it or around it is refused', async () => {
    for (const outputFolder of ['/share', '/share/out', '/share/BX-0417/x', '/']) {
      const world = makeWorld(files);
      const refused = await open(world, { settings: { outputFolder } });
      expect(refused, outputFolder).toMatchObject({ ok: false, problem: { code: 'output-nested' } });
      expect(world.disk.files().has('/share/index.html')).toBe(false);
    }
  });

  it('a pass with nothing new opens no spectrum, writes nothing and appends nothing', async () => {
    const world = makeWorld(files);
    await pass(world);
    const before = [...world.disk.files()].map(([path, bytes]) => `${path} ${bytes.toString('base64')}`);
    const sharePort = makeFaultyPort(world.disk.port, () => undefined);
    const port = makeFaultyPort(world.disk.port, () => undefined);
    await pass(world, { sharePort, port });
    expect([...world.disk.files()].map(([path, bytes]) => `${path} ${bytes.toString('base64')}`)).toEqual(before);
    expect(sharePort.calls.filter(({ operation, path }) => operation === 'open' && path.endsWith('.jdx'))).toEqual([]);
    expect(
      port.calls.filter(({ operation, path }) => ['write', 'rename', 'link'].includes(operation) && path.includes('BX-0417')),
    ).toEqual([]);
  });
});

function permutations<T>(items: readonly T[]): T[][] {
  if (items.length <= 1) return [[...items]];
  return items.flatMap((item, index) =>
    permutations([...items.slice(0, index), ...items.slice(index + 1)]).map((rest) => [item, ...rest]),
  );
}
