import { describe, expect, it } from 'vitest';
import { sha256 } from '../../src/base/sha256.js';
import { makeMeasurer } from '../../src/record/measurer.js';
import { holdRecord } from '../../src/record/runRecord.js';
import { type AmendRequest, amendRun } from '../../src/watch/amendRun.js';
import {
  contextOf,
  failures,
  jcamp,
  lasting,
  ledgerOf,
  makeWorld,
  measureCheaply,
  methodPath,
  methodText,
  nightFiles,
  out,
  pass,
  rendererOf,
  startMs,
  verify,
  type World,
} from './world.js';

const files = nightFiles(3);
const run = `${out}/BX-0417`;
const ledgerPath = `${run}/ledger.jsonl`;
const old = startMs - 1e6;

async function night() {
  const world = makeWorld(files);
  expect((await pass(world)).ok).toBe(true);
  return world;
}

const ledgerBytes = (world: World) => world.disk.files().get(ledgerPath)!;
const setLedger = (world: World, bytes: Uint8Array | string) => world.disk.write(ledgerPath, bytes);
const linesOf = (world: World) => ledgerBytes(world).toString('utf8').split('\n').slice(0, -1);
const joined = (lines: readonly string[]) => `${lines.join('\n')}\n`;

function amend(world: World, request: Omit<AmendRequest, 'by' | 'because'> & Partial<AmendRequest>, program?: string) {
  const context = contextOf(world, program !== undefined ? { program } : {});
  const deps = {
    context,
    measurer: makeMeasurer(measureCheaply),
    renderer: rendererOf(context.port),
    renderedMs: new Map(),
    series: new Map(),
    onEvent: () => undefined,
  };
  return amendRun(deps, run, { by: 'QA-2', because: 'the tube was shaken', ...request });
}

const seriesOf = (world: World) =>
  JSON.parse(world.disk.files().get(`${run}/series.json`)!.toString('utf8')) as {
    method: { sha256: string };
    points: { file: string; sha256: string; status: string; flags: { code: string }[] }[];
  };

/** The pass that must write: a new file is there. */
async function passWithNew(world: World) {
  world.disk.write('/share/BX-0417/tp-900.jdx', jcamp('new', '2027-01-15T23:00:00Z'), old);
  return pass(world);
}

describe('a ledger that is not as it was left', () => {
  it('F66: cut at every byte of the last entries recovers or refuses, and never misreads', { timeout: 120_000 }, async () => {
    const world = await night();
    const whole = ledgerBytes(world);
    const lines = linesOf(world);
    const start = whole.length - Buffer.byteLength(joined(lines.slice(-3)));
    const expected = lasting(world.disk);
    const cut = await night();
    for (let length = start; length < whole.length; length += 1) {
      setLedger(cut, whole.subarray(0, length));
      const held = await holdRecord({ context: contextOf(cut), outputFolder: out, names: ['BX-0417'], run: 'BX-0417' });
      expect(held.ok, `cut to ${length}`).toBe(true);
      if (held.ok) await held.value.release();
      const kept = linesOf(cut);
      const complete = whole.subarray(0, length).toString('utf8').split('\n').length - 1;
      expect(kept.slice(0, complete), `cut to ${length}`).toEqual(lines.slice(0, complete));
      expect(kept).toHaveLength(whole[length - 1] === 0x0a ? complete : complete + 1);
      if (whole[length - 1] !== 0x0a) expect(ledgerOf(cut).at(-1)).toMatchObject({ kind: 'exception', name: 'recovered' });
      const torn = whole.subarray(whole.lastIndexOf(0x0a, length - 1) + 1, length);
      if (torn.length > 0)
        expect(
          cut.disk
            .files()
            .get(`${run}/torn/${sha256(torn)}.bin`)
            ?.equals(torn),
        ).toBe(true);
      if (length % 40 !== 0) continue;
      const summary = await pass(cut);
      expect(summary.ok && summary.value.problems, `cut to ${length}`).toEqual([]);
      expect(lasting(cut.disk), `cut to ${length}`).toEqual(expected);
      expect(failures(await verify(cut)), `cut to ${length}`).toEqual([]);
    }
  });

  const mutations: Record<string, (lines: string[]) => { lines: string[]; firstBad: number }> = {
    'edited by hand': (lines) => ({ lines: lines.with(3, lines[3]!.replace('tp-001', 'tp-999')), firstBad: 4 }),
    'edited by hand with a fitting hash': (lines) => {
      const text = lines[3]!.slice(0, lines[3]!.lastIndexOf('\t')).replace('tp-001', 'tp-999');
      return { lines: lines.with(3, `${text}\t${sha256(text)}`), firstBad: 5 };
    },
    'without one entry': (lines) => ({ lines: lines.toSpliced(3, 1), firstBad: 4 }),
    'with two entries exchanged': (lines) => ({ lines: lines.with(2, lines[3]!).with(3, lines[2]!), firstBad: 3 }),
    'with an entry twice': (lines) => ({ lines: lines.toSpliced(3, 0, lines[3]!), firstBad: 5 }),
    'without its first entry': (lines) => ({ lines: lines.slice(1), firstBad: 1 }),
    'with an empty line': (lines) => ({ lines: lines.toSpliced(2, 0, ''), firstBad: 3 }),
  };
  for (const [what, mutate] of Object.entries(mutations)) {
    it(`F67: ${what} is found, the first bad entry is named, and nothing is written`, async () => {
      const world = await night();
      const { lines, firstBad } = mutate(linesOf(world));
      setLedger(world, joined(lines));
      const before = ledgerBytes(world);
      const verification = await verify(world);
      expect(verification.checks).toMatchObject([
        { name: 'chain', state: 'fail', seq: firstBad, message: expect.stringContaining(`entry ${firstBad}`) },
      ]);
      const summary = await passWithNew(world);
      expect(summary.ok && summary.value.problems.map(({ code }) => code)).toEqual(['ledger-damaged']);
      expect(ledgerBytes(world).equals(before)).toBe(true);
    });
  }

  it('F18: a flipped bit in a stored file or the ledger is found, named, and never rendered', async () => {
    for (const folder of ['raw', 'points', '']) {
      const world = await night();
      const path = folder === '' ? ledgerPath : [...world.disk.files(`${run}/${folder}`).keys()].at(-1)!;
      const bytes = Buffer.from(world.disk.files().get(path)!);
      bytes[bytes.length >> 1]! ^= 1;
      world.disk.write(path, bytes);
      const failed = failures(await verify(world));
      expect(failed.length).toBeGreaterThan(0);
      expect(failed[0]).toMatch(/entry \d+/);
      const derived = await rendererOf(world.disk.port).derive(run, []);
      expect(derived.ok).toBe(true);
      if (folder !== 'points') continue;
      const before = world.disk.files().get(`${run}/report.html`);
      const summary = await passWithNew(world);
      expect(summary.ok && summary.value.problems.map(({ code }) => code)).toContain('object-damaged');
      expect(world.disk.files().get(`${run}/report.html`)).toEqual(before);
    }
  });

  it('F18: a damaged stored file is not taken for the captured bytes when they come again', async () => {
    const world = await night();
    const [path] = [...world.disk.files(`${run}/raw`).keys()].filter((name) =>
      name.includes(sha256(files['BX-0417/tp-001.jdx']!)),
    );
    const bytes = Buffer.from(world.disk.files().get(path!)!);
    bytes[bytes.length - 6]! ^= 1;
    world.disk.write(path!, bytes);
    expect(await amend(world, { action: 'measure-again' })).toMatchObject({ ok: false, problem: { code: 'object-damaged' } });
    const fresh = makeWorld(files);
    fresh.disk.write(path!, bytes);
    fresh.disk.write(ledgerPath, joined(linesOf(world).slice(0, 1)));
    const summary = await pass(fresh);
    expect(summary.ok && summary.value.problems.map(({ code }) => code)).toContain('object-damaged');
  });

  it('F68: put back to an older copy is found by the printed head and by derived files that are newer', async () => {
    const world = makeWorld(nightFiles(2));
    await pass(world);
    const older = ledgerBytes(world);
    world.disk.write('/share/BX-0417/tp-002.jdx', files['BX-0417/tp-002.jdx']!, old);
    await pass(world);
    const head = (await verify(world)).head!;
    expect(failures(await verify(world, 'BX-0417', { head: head.hash.slice(0, 12) }))).toEqual([]);
    expect(failures(await verify(world, 'BX-0417', { head: `${head.seq} ${head.hash}` }))).toEqual([]);
    setLedger(world, older);
    expect(failures(await verify(world, 'BX-0417', { head: head.hash.slice(0, 12) }))[0]).toMatch(/cut off, or an older copy/);
    const plain = await verify(world);
    expect(failures(plain).join()).toMatch(/series\.json/);
    expect(plain.checks.some(({ name, state }) => name === 'unreferenced' && state === 'note')).toBe(true);
    expect(failures(await verify(world, 'BX-0417', { head: 'zz' }))[0]).toMatch(/no ledger head/);
  });

  it('F69: a deleted ledger beside stored files is refused; only a signed adoption goes on, and the numbers come out the same', async () => {
    const world = await night();
    const expected = lasting(world.disk);
    world.disk.remove(ledgerPath);
    const summary = await pass(world);
    expect(summary.ok && summary.value.problems.map(({ code }) => code)).toEqual(['ledger-missing']);
    expect(world.disk.files().has(ledgerPath)).toBe(false);
    expect(failures(await verify(world))[0]).toMatch(/no ledger/);
    expect(await amend(world, { action: 'adopt-objects', because: 'disk was swapped' })).toMatchObject({ ok: true });
    await pass(world);
    expect(lasting(world.disk)).toEqual(expected);
    expect(ledgerOf(world)[1]).toMatchObject({ kind: 'amendment', action: 'adopt-objects', by: 'QA-2' });
    expect(failures(await verify(world))).toEqual([]);
  });

  it('F70: saved again by an editor gets a clear message and no repair', async () => {
    for (const change of [(text: string) => text.replaceAll('\n', '\r\n'), (text: string) => `\ufeff${text}`]) {
      const world = await night();
      setLedger(world, change(ledgerBytes(world).toString('utf8')));
      const before = ledgerBytes(world);
      const summary = await passWithNew(world);
      expect(summary.ok && summary.value.problems).toMatchObject([
        { code: 'ledger-resaved', hint: expect.stringContaining('editor') },
      ]);
      expect(ledgerBytes(world).equals(before)).toBe(true);
      expect(failures(await verify(world))).toHaveLength(1);
    }
  });

  it('F71: a changed, replaced or invented derived file is found', async () => {
    for (const name of ['report.html', 'report.pdf', 'series.json', 'series.csv']) {
      const world = await night();
      const path = `${run}/${name}`;
      world.disk.write(path, Buffer.concat([world.disk.files().get(path)!, Buffer.from(' ')]));
      expect(failures(await verify(world))).toEqual([expect.stringContaining(`${name}: it was changed after it was written`)]);
    }
  });

  it('a number changed in a point record with all hashes made to fit is found by computing it again', async () => {
    const world = await night();
    const other = makeWorld(files);
    await pass(other, {
      measure: (task) => {
        const result = measureCheaply(task);
        return result.ok ? { ok: true, value: result.value.map((record) => ({ ...record, observeMhz: 401 })) } : result;
      },
    });
    expect(failures(await verify(world))).toEqual([]);
    const failed = failures(await verify(other));
    expect(failed).toHaveLength(3);
    expect(failed[0]).toMatch(/entry 3, tp-000\.jdx: computed again it differs at observeMhz: recorded 401, now 400/);
  });

  it('verify compares with the share and names what differs', async () => {
    const world = await night();
    expect(failures(await verify(world, 'BX-0417', { share: '/share' }))).toEqual([]);
    expect(failures(await verify(world, 'BX-0417', { share: '/share/BX-0417' }))).toEqual([]);
    world.disk.write('/share/BX-0417/tp-001.jdx', jcamp('other'), old);
    expect(failures(await verify(world, 'BX-0417', { share: '/share' }))).toEqual([
      expect.stringContaining('tp-001.jdx on the share is not what was captured'),
    ]);
    expect(failures(await verify(world, 'BX-0417', { share: '/nowhere' }))).toEqual([
      expect.stringContaining('cannot be listed'),
    ]);
  });
});

describe('amendments, methods and programs', () => {
  it('an amendment says who and why, the series follows, and what stood before is still there', async () => {
    const world = await night();
    const before = linesOf(world);
    expect(await amend(world, { action: 'set-aside', point: 'tp-001.jdx' })).toMatchObject({ ok: true });
    expect(linesOf(world).slice(0, before.length)).toEqual(before);
    expect(seriesOf(world).points[1]).toMatchObject({ status: 'set-aside' });
    expect(await amend(world, { action: 'restore', point: seriesOf(world).points[1]!.sha256.slice(0, 10) })).toMatchObject({
      ok: true,
    });
    expect(seriesOf(world).points[1]?.status).not.toBe('set-aside');
    expect(await amend(world, { action: 'comment' })).toMatchObject({ ok: true });
    expect(failures(await verify(world))).toEqual([]);
    const lines = linesOf(world).length;
    await pass(world);
    expect(linesOf(world)).toHaveLength(lines);
  });

  it('an amendment without a name, a reason or a known point is refused and changes nothing', async () => {
    const world = await night();
    const before = ledgerBytes(world);
    expect(await amend(world, { action: 'comment', by: ' ' })).toMatchObject({ ok: false, problem: { code: 'amend-unsigned' } });
    expect(await amend(world, { action: 'comment', because: '' })).toMatchObject({
      ok: false,
      problem: { code: 'amend-unsigned' },
    });
    expect(await amend(world, { action: 'set-aside', point: 'tp-77.jdx' })).toMatchObject({
      ok: false,
      problem: { code: 'point-unknown' },
    });
    expect(await amend(world, { action: 'adopt-objects' })).toMatchObject({ ok: false, problem: { code: 'amend-useless' } });
    expect(ledgerBytes(world).equals(before)).toBe(true);
  });

  it('F36: restoring the later content of a replaced file lets it stand, signed', async () => {
    const world = await night();
    const text = jcamp('exported again', '2027-01-15T19:10:00Z');
    world.disk.write('/share/BX-0417/tp-001.jdx', text, old + 5);
    await pass(world);
    expect(seriesOf(world).points[1]?.sha256).not.toBe(sha256(text));
    expect(await amend(world, { action: 'restore', point: sha256(text).slice(0, 12) })).toMatchObject({ ok: true });
    expect(seriesOf(world).points[1]?.sha256).toBe(sha256(text));
    expect(failures(await verify(world))).toEqual([]);
  });

  it('F63: a method edited mid-run is captured and shown; points keep the captured one until a person asks for the new', async () => {
    const world = await night();
    const first = sha256(methodText);
    const edited = methodText.replace('"3"', '"4"');
    world.disk.write(methodPath, edited, old);
    await passWithNew(world);
    expect(ledgerOf(world).filter(({ kind }) => kind === 'method')).toMatchObject([
      { sha256: first, state: 'used', revision: 1 },
      { sha256: sha256(edited), state: 'noticed', revision: 2 },
    ]);
    expect(
      ledgerOf(world)
        .filter(({ kind }) => kind === 'input')
        .every(({ methodSha256 }) => methodSha256 === first),
    ).toBe(true);
    expect(seriesOf(world).method.sha256).toBe(first);
    expect(world.events.some(({ message }) => message.includes('--use-method'))).toBe(true);
    const lines = linesOf(world).length;
    await pass(world);
    expect(linesOf(world)).toHaveLength(lines);
    expect(
      await amend(world, { action: 'use-method', method: { text: edited, file: methodPath }, because: 'window was too narrow' }),
    ).toMatchObject({ ok: true });
    expect(seriesOf(world).method.sha256).toBe(sha256(edited));
    expect(seriesOf(world).points).toHaveLength(4);
    expect(ledgerOf(world).filter(({ again }) => again === true)).toHaveLength(4);
    expect(failures(await verify(world))).toEqual([]);
    const fresh = makeWorld(files);
    fresh.disk.write(methodPath, edited, old);
    await passWithNew(fresh);
    expect(world.disk.files().get(`${run}/series.json`)?.toString()).not.toBe('');
    expect(seriesOf(fresh).points).toEqual(seriesOf(world).points);
  });

  it('F64: an invalid method or run file at the start is refused with its line; mid-run the recorded one stays, with a warning', async () => {
    const broken = makeWorld(files);
    broken.disk.write(methodPath, methodText.replace('role: product', 'role: produkt'), old);
    const refused = await pass(broken);
    expect(refused.ok && refused.value.problems[0]?.where?.line).toBe(11);
    expect(broken.disk.files().has(ledgerPath)).toBe(false);
    const world = await night();
    const expected = lasting(world.disk);
    world.disk.write(methodPath, 'kinetrail: [', old);
    world.disk.write('/share/BX-0417/run.yaml', 'kinetrail: run/1\nbatch: [\n', old);
    const summary = await pass(world);
    expect(summary.ok && summary.value.problems.length).toBeGreaterThanOrEqual(2);
    expect(lasting(world.disk)).toEqual(expected);
    await passWithNew(world);
    expect(seriesOf(world).points).toHaveLength(4);
  });

  it('F65: after an upgrade old results stay as they are; measuring again is asked for and recorded', async () => {
    const world = await night();
    world.disk.write('/share/BX-0417/tp-900.jdx', jcamp('new', '2027-01-15T23:00:00Z'), old);
    await pass(world, { program: '0.2.0' });
    const engines = () =>
      ledgerOf(world)
        .filter(({ kind }) => kind === 'input')
        .map(({ engine }) => engine);
    expect(engines()).toEqual(['0.1.0', '0.1.0', '0.1.0', '0.2.0']);
    const verification = await verify(world, 'BX-0417', {
      program: '0.2.0',
      measure: (task) => {
        const result = measureCheaply(task);
        return result.ok ? { ok: true, value: result.value.map((record) => ({ ...record, observeMhz: 400.0001 })) } : result;
      },
    });
    expect(
      verification.checks.some(({ state, message }) => state === 'pass' && /program 0\.1\.0 agree within 0\.0001/.test(message)),
    ).toBe(true);
    expect(await amend(world, { action: 'measure-again', because: 'validated version' }, '0.2.0')).toMatchObject({ ok: true });
    expect(engines().slice(4)).toEqual(['0.2.0', '0.2.0', '0.2.0', '0.2.0']);
  });

  it('F07: a file whose measuring kills its process twice is set aside, each death is in the record, and the rest goes on', async () => {
    const world = makeWorld(files);
    let deaths = 0;
    const { open } = await import('./world.js');
    const opened = await open(world);
    if (!opened.ok) throw new Error(opened.problem.message);
    const cheap = makeMeasurer(measureCheaply);
    const deadly = {
      ...cheap,
      measure: async (task: Parameters<typeof cheap.measure>[0]) => {
        if (task.fileName !== 'tp-001.jdx') return cheap.measure(task);
        deaths += 1;
        return { kind: 'died' as const, message: 'out of memory' };
      },
    };
    const { watchOnce } = await import('../../src/watch/watchOnce.js');
    await watchOnce({ ...opened.value.session, measurer: deadly });
    await opened.value.close();
    expect(deaths).toBe(2);
    expect(ledgerOf(world).filter(({ name }) => name === 'measuring-died')).toHaveLength(2);
    expect(ledgerOf(world).findLast(({ file, kind }) => kind === 'input' && file === 'tp-001.jdx')).toMatchObject({
      state: 'set-aside',
      flags: [{ code: 'measuring-died' }],
    });
    expect(seriesOf(world).points).toHaveLength(2);
  });
});

describe('two that write to one record', () => {
  it('F61: a lock is taken over only from a process that is certainly gone, and the takeover is recorded', async () => {
    const world = await night();
    const context = contextOf(world);
    const first = await holdRecord({ context, outputFolder: out, names: ['BX-0417'], run: 'BX-0417' });
    expect(first.ok).toBe(true);
    const alive = await holdRecord({
      context: { ...context, isHolderAlive: () => true },
      outputFolder: out,
      names: ['BX-0417'],
      run: 'BX-0417',
    });
    expect(alive).toMatchObject({
      ok: false,
      problem: { code: 'record-held', message: expect.stringMatching(/process \d+ of operator on .* since 2027/) },
    });
    const taken = await holdRecord({ context, outputFolder: out, names: ['BX-0417'], run: 'BX-0417' });
    expect(taken.ok).toBe(true);
    expect(ledgerOf(world).at(-1)).toMatchObject({ kind: 'exception', name: 'takeover' });
  });

  it('F62: a paused holder that wakes after a takeover is stopped by the fence; the ledger stays whole', async () => {
    const world = await night();
    const context = contextOf(world);
    const paused = await holdRecord({ context, outputFolder: out, names: ['BX-0417'], run: 'BX-0417' });
    const taken = await holdRecord({ context, outputFolder: out, names: ['BX-0417'], run: 'BX-0417' });
    if (!paused.ok || !taken.ok) throw new Error('both must have held it');
    const before = ledgerBytes(world);
    const woken = await paused.value.append({ kind: 'exception', name: 'outage', message: 'from the past' });
    expect(woken).toMatchObject({ ok: false, problem: { code: 'ledger-changed' } });
    expect(ledgerBytes(world).equals(before)).toBe(true);
    await paused.value.release();
    expect(await taken.value.append({ kind: 'exception', name: 'outage', message: 'by the new holder' })).toMatchObject({
      ok: true,
    });
    await taken.value.release();
    expect(failures(await verify(world))).toEqual([]);
  });

  it('F62: a ledger that was replaced under a holder is not written to', async () => {
    const world = await night();
    const held = await holdRecord({ context: contextOf(world), outputFolder: out, names: ['BX-0417'], run: 'BX-0417' });
    if (!held.ok) throw new Error('must be held');
    const copy = ledgerBytes(world);
    world.disk.remove(ledgerPath);
    setLedger(world, copy);
    expect(await held.value.append({ kind: 'exception', name: 'outage', message: 'x' })).toMatchObject({
      ok: false,
      problem: { code: 'ledger-changed' },
    });
    expect(ledgerBytes(world).equals(copy)).toBe(true);
  });
});

describe('derived files', () => {
  it('F73: rendering again from the same record gives the same bytes and appends nothing', async () => {
    const world = await night();
    const before = [...world.disk.files(run)].map(([path, bytes]) => `${path} ${sha256(bytes)}`);
    for (const name of ['report.html', 'report.pdf', 'series.json', 'series.csv']) world.disk.remove(`${run}/${name}`);
    world.clock.advance(3_600_000);
    await pass(world);
    expect([...world.disk.files(run)].map(([path, bytes]) => `${path} ${sha256(bytes)}`)).toEqual(before);
  });
});
