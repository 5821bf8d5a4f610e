import { gunzipSync, gzipSync } from 'node:zlib';
import { expect, it } from 'vitest';
import { sha256 } from '../../src/base/sha256.js';
import { getRaw, putRaw } from '../../src/record/objectStore.js';
import { makeDisk } from '../fault/simulatedDisk.js';

function disk() {
  const made = makeDisk();
  made.makeFolders('/run/raw');
  made.makeFolders('/run/points');
  return made;
}

it('stores bytes under their hash, compressed, with a header that holds no time and no system', async () => {
  const { port, files } = disk();
  const bytes = Buffer.from('##TITLE=x\n'.repeat(100));
  expect(await putRaw(port, '/run', bytes)).toEqual({ ok: true, value: sha256(bytes) });
  const packed = files().get(`/run/raw/${sha256(bytes)}.gz`)!;
  expect(packed.length).toBeLessThan(bytes.length);
  // RFC 1952: bytes 4 to 7 are the modification time, byte 9 the operating system; 255 is "unknown".
  expect([...packed.subarray(4, 8), packed[9]]).toEqual([0, 0, 0, 0, 255]);
  expect(gunzipSync(packed).equals(bytes)).toBe(true);
  expect(await getRaw(port, '/run', sha256(bytes))).toMatchObject({ ok: true });
});

it('storing the same bytes again changes nothing', async () => {
  const { port, files } = disk();
  await putRaw(port, '/run', Buffer.from('x'));
  const before = [...files().values()][0];
  expect(await putRaw(port, '/run', Buffer.from('x'))).toMatchObject({ ok: true });
  expect(files().size).toBe(1);
  expect([...files().values()][0]).toBe(before);
});

it('what is missing, cut or exchanged is a problem, never bytes', async () => {
  const { port, write, files } = disk();
  await putRaw(port, '/run', Buffer.from('hello'));
  const [path] = [...files().keys()];
  const hash = sha256('hello');
  const packed = Buffer.from(files().get(path!)!);
  // The last is whole and of another content: only the hash tells.
  for (const bytes of [packed.subarray(0, 12), Buffer.alloc(0), Buffer.from('rubbish'), gzipSync('other')]) {
    write(path!, bytes);
    expect(await getRaw(port, '/run', hash)).toMatchObject({ ok: false, problem: { code: 'object-damaged' } });
  }
  expect(await getRaw(port, '/run', 'f'.repeat(64))).toMatchObject({ ok: false, problem: { code: 'object-missing' } });
});
