import { expect, it } from 'vitest';
import { readRunFacts } from '../../src/record/runFacts.js';
import { jcamp, ledgerOf, makeWorld, minutesLater, nightFiles, out, pass, startMs } from '../fault/world.js';

const run = `${out}/BX-0417`;

it('the facts of a run come from its folder alone, with the time of the record and not of the clock', async () => {
  const world = makeWorld(nightFiles(3));
  await pass(world);
  const first = await readRunFacts(run, world.disk.port);
  world.clock.advance(1e8);
  expect(await readRunFacts(run, world.disk.port)).toEqual(first);
  if (!first.ok) throw new Error(first.problem.message);
  const last = ledgerOf(world).findLast(({ kind }) => kind === 'input')!;
  expect(first.value).toMatchObject({
    run: 'BX-0417',
    createdUtc: last.at,
    program: '0.1.0',
    head: { seq: last.seq },
    engines: ['0.1.0'],
    methodRevision: 1,
  });
  expect(first.value.files.map(({ file, state }) => `${file} ${state}`)).toEqual([
    'tp-000.jdx measured',
    'tp-001.jdx measured',
    'tp-002.jdx measured',
  ]);
  expect(first.value.ledgerText.split('\n')).toHaveLength(first.value.head.seq + 1);
});

it('late, duplicate, replaced, vanished and unfinished files are exceptions or fates, each once', async () => {
  const world = makeWorld(nightFiles(3), () => world.disk.remove('/share/BX-0417/young.jdx'));
  await pass(world);
  world.disk.write('/share/BX-0417/late.jdx', jcamp('late', minutesLater(5)), startMs - 1e6);
  world.disk.write('/share/BX-0417/zz-copy.jdx', nightFiles(1)['BX-0417/tp-000.jdx']!, startMs - 1e6);
  world.disk.write('/share/BX-0417/tp-002.jdx', jcamp('exported again', minutesLater(20)), startMs - 1e5);
  world.disk.write('/share/BX-0417/half.jdx', '##TITLE=', startMs - 1e5);
  world.disk.write('/share/BX-0417/young.jdx', jcamp('young'), world.clock.nowMs());
  await pass(world);
  const facts = await readRunFacts(run, world.disk.port);
  if (!facts.ok) throw new Error(facts.problem.message);
  const kinds = facts.value.exceptions.map(({ kind, file }) => `${kind} ${file}`);
  expect(kinds.sort()).toEqual([
    'duplicate zz-copy.jdx',
    'gap tp-002.jdx',
    'late late.jdx',
    'replaced tp-002.jdx',
    'vanished young.jdx',
  ]);
  const fates = facts.value.files.map(({ state }) => state).sort();
  expect(fates).toEqual(['duplicate', 'incomplete', 'measured', 'measured', 'measured', 'measured', 'replaced', 'vanished']);
});

it('a folder without a record is a problem with a hint', async () => {
  const world = makeWorld();
  expect(await readRunFacts('/out/none', world.disk.port)).toMatchObject({
    ok: false,
    problem: { code: 'record-missing', hint: expect.any(String) },
  });
});
