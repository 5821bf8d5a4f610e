import { mkdtempSync, rmSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, describe, expect, it } from 'vitest';
import { publishNew, readWhole, replaceFile, writeAll } from '../../src/record/durable.js';
import { type FilePort, realFilePort } from '../../src/record/filePort.js';
import { makeFaultyPort } from './faultyPort.js';
import { makeDisk } from './simulatedDisk.js';

const folder = mkdtempSync(join(tmpdir(), 'ports-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

/** One suite for every port: what the fault tests prove in memory holds on the real disk. */
const ports: [string, FilePort, string][] = [
  ['the real disk', realFilePort, folder],
  ['the simulated disk', simulated(), '/work'],
  ['a faulty port without faults', makeFaultyPort(simulated(), () => undefined), '/work'],
];

function simulated(): FilePort {
  const disk = makeDisk();
  disk.makeFolders('/work');
  return disk.port;
}

const codeOf = (promise: Promise<unknown>) =>
  promise.then(
    () => 'none',
    (cause: NodeJS.ErrnoException) => cause.code,
  );

for (const [name, port, root] of ports) {
  describe(`${name} as a file port`, () => {
    it('publishes a new file once, and leaves no temporary name', async () => {
      await port.makeFolder(`${root}/a`);
      expect(await publishNew(port, `${root}/a`, 'x', Buffer.from('one'))).toBe(true);
      expect(await publishNew(port, `${root}/a`, 'x', Buffer.from('two'))).toBe(false);
      expect((await readWhole(port, `${root}/a/x`))?.toString()).toBe('one');
      await replaceFile(port, `${root}/a`, 'x', Buffer.from('three'));
      expect((await readWhole(port, `${root}/a/x`))?.toString()).toBe('three');
      expect((await port.readFolder(`${root}/a`)).map((entry) => entry.name.toString())).toEqual(['x']);
    });

    it('appends, reports sizes, truncates, and reads any part', async () => {
      const made = await port.open(`${root}/log`, 'create');
      await writeAll(made, Buffer.from('abc'));
      await made.close();
      const log = await port.open(`${root}/log`, 'append');
      await writeAll(log, Buffer.from('def'));
      expect((await log.stat()).sizeBytes).toBe(6);
      const piece = Buffer.alloc(10);
      expect(await log.read(piece, 4)).toBe(2);
      expect(piece.subarray(0, 2).toString()).toBe('ef');
      expect(await log.read(piece, 6)).toBe(0);
      await log.truncate(2);
      await log.sync();
      await log.dataSync();
      await writeAll(log, Buffer.from('X'));
      await log.close();
      expect((await readWhole(port, `${root}/log`))?.toString()).toBe('abX');
    });

    it('fails with the codes of the system', async () => {
      expect(await codeOf(port.open(`${root}/none`, 'read'))).toBe('ENOENT');
      expect(await codeOf(port.open(`${root}/none`, 'append'))).toBe('ENOENT');
      expect(await codeOf(port.open(`${root}/log`, 'create'))).toBe('EEXIST');
      expect(await codeOf(port.makeFolder(`${root}/a`))).toBe('EEXIST');
      expect(await codeOf(port.link(`${root}/log`, `${root}/a/x`))).toBe('EEXIST');
      expect(await codeOf(port.unlink(`${root}/none`))).toBe('ENOENT');
      expect(await codeOf(port.readFolder(`${root}/log`))).toBe('ENOTDIR');
      expect(await codeOf(port.stat(`${root}/log/x`))).toBe('ENOTDIR');
      expect(await codeOf(port.realPath(`${root}/none`))).toBe('ENOENT');
    });

    it('tells kinds, keeps the inode through a second name and a rename, and gives another to another file', async () => {
      const { inode, kind } = await port.stat(`${root}/log`);
      expect(kind).toBe('file');
      expect((await port.stat(`${root}/a`)).kind).toBe('folder');
      await port.link(`${root}/log`, `${root}/second`);
      expect((await port.stat(`${root}/second`)).inode).toBe(inode);
      await port.rename(`${root}/second`, `${root}/third`);
      expect((await port.stat(`${root}/third`)).inode).toBe(inode);
      expect((await port.stat(`${root}/a/x`)).inode).not.toBe(inode);
      await port.syncFolder(root);
      const names = (await port.readFolder(root)).map((entry) => `${entry.name.toString()} ${entry.kind}`).sort();
      expect(names).toEqual(['a folder', 'log file', 'third file']);
    });

    it('keeps names that are not UTF-8', async () => {
      const odd = Buffer.concat([Buffer.from(`${root}/`), Buffer.from([0xff, 0xfe, 0x41])]);
      await (await port.open(odd, 'create')).close();
      expect((await port.readFolder(root)).some((entry) => entry.name.equals(Buffer.from([0xff, 0xfe, 0x41])))).toBe(true);
      await port.unlink(odd);
    });
  });
}
