import { describe, expect, it } from 'vitest';
import type { FileStat } from '../../src/record/filePort.js';
import { makeSettling } from '../../src/watch/settling.js';

const stat = (sizeBytes: number, modifiedMs = 0): FileStat => ({
  kind: 'file',
  sizeBytes,
  modifiedNs: BigInt(modifiedMs) * 1_000_000n,
  inode: 1n,
  device: 1n,
});

describe('settling', () => {
  it('counts quiet time by the monotonic clock and starts again at every change of size or time', () => {
    const settling = makeSettling({ settleMs: 100, trustsModifiedTime: false });
    expect(settling.observe('a', stat(1), 0, 1000)).toEqual({ isQuiet: false, waitMs: 100 });
    expect(settling.observe('a', stat(2), 0, 1099)).toEqual({ isQuiet: false, waitMs: 100 });
    expect(settling.observe('a', stat(2, 5), 0, 1150)).toEqual({ isQuiet: false, waitMs: 100 });
    expect(settling.observe('a', stat(2, 5), 0, 1249)).toEqual({ isQuiet: false, waitMs: 1 });
    expect(settling.observe('a', stat(2, 5), 0, 1250)).toEqual({ isQuiet: true, seenForMs: 250 });
  });

  it('a single pass trusts a modification time that lies far enough back, and none from the future', () => {
    const settling = makeSettling({ settleMs: 2000, trustsModifiedTime: true });
    expect(settling.observe('old', stat(1, 7_999), 10_000, 0)).toMatchObject({ isQuiet: true });
    expect(settling.observe('young', stat(1, 8_001), 10_000, 0)).toMatchObject({ isQuiet: false });
    expect(settling.observe('future', stat(1, 99_000), 10_000, 0)).toMatchObject({ isQuiet: false });
    expect(settling.observe('changed', stat(1, 9_000), 10_000, 0)).toMatchObject({ isQuiet: false });
    expect(settling.observe('changed', stat(2, 1_000), 10_000, 10)).toMatchObject({ isQuiet: false });
  });

  it('forgets what was taken in, and restarts what changed while it was read', () => {
    const settling = makeSettling({ settleMs: 100, trustsModifiedTime: false });
    settling.observe('a', stat(1), 0, 0);
    settling.restart('a', 90);
    expect(settling.observe('a', stat(1), 0, 120)).toEqual({ isQuiet: false, waitMs: 70 });
    settling.forget('a');
    expect(settling.keys()).toEqual([]);
  });
});
