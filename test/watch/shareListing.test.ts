import { expect, it } from 'vitest';
import { isSpectrumName, listShare } from '../../src/watch/shareListing.js';
import { makeDisk } from '../fault/simulatedDisk.js';

it('knows the names of finished spectra', () => {
  for (const name of ['a.jdx', 'A.JDX', 'b.dx', 'c.jcamp', 'c.JCAMP', 'with blank.jdx', '-.dx'])
    expect(isSpectrumName(Buffer.from(name)), name).toBe(true);
  for (const name of ['.a.jdx', '~a.jdx', 'a.jdx.part', 'a.jdx~', 'a.txt', 'jdx', 'a.jdxx'])
    expect(isSpectrumName(Buffer.from(name)), name).toBe(false);
});

it('a run is any folder that directly holds spectra; sub-folders are runs of their own; hidden folders are passed over', async () => {
  const disk = makeDisk();
  for (const path of [
    '/s/A/1.jdx',
    '/s/A/deep/er/2.dx',
    '/s/B/notes.txt',
    '/s/.snapshot/A/1.jdx',
    '/s/C d/3.jcamp',
    '/s/A/run.yaml',
  ])
    disk.write(path, 'x');
  disk.putLink('/s/linked', '/s/A');
  const listed = await listShare(disk.port, '/s');
  if (!listed.ok) throw new Error(listed.problem.message);
  expect(listed.value.runs.map(({ key, spectra, runFile }) => `${key} ${spectra.length} ${runFile !== undefined}`)).toEqual([
    'A 1 true',
    'A/deep/er 1 false',
    'C d 1 false',
  ]);
  expect(listed.value.skipped).toEqual([{ path: 'linked', why: 'a link: not followed' }]);
});

it('the share itself may be a run', async () => {
  const disk = makeDisk();
  disk.write('/s/1.jdx', 'x');
  const listed = await listShare(disk.port, '/s');
  expect(listed.ok && listed.value.runs.map(({ names }) => names.length)).toEqual([0]);
});

it('a share that is missing is away; one that is a file is no share', async () => {
  const disk = makeDisk();
  disk.write('/file', 'x');
  expect(await listShare(disk.port, '/none')).toMatchObject({ ok: false, problem: { code: 'share-away' } });
  expect(await listShare(disk.port, '/file')).toMatchObject({ ok: false, problem: { code: 'share-not-a-folder' } });
});
