import { describe, expect, it } from 'vitest';
import { firstPrev, type LedgerEntry } from '../../src/record/ledgerEntry.js';
import { encodeLine, parseLedger } from '../../src/record/ledgerLine.js';

function entry(seq: number, prev: string, more: object = {}): LedgerEntry {
  return {
    kind: 'exception',
    name: 'outage',
    message: 'm',
    host: 'h',
    user: 'u',
    program: '0.1.0',
    seq,
    prev,
    at: '2027-01-15T20:00:00.000Z',
    utcOffsetMin: 60,
    ...more,
  } as LedgerEntry;
}

function chain(count: number): Buffer[] {
  let prev = firstPrev;
  return Array.from({ length: count }, (_, index) => {
    const { bytes, hash } = encodeLine(entry(index + 1, prev));
    prev = hash;
    return bytes;
  });
}

describe('a line of the ledger', () => {
  it('is canonical JSON, a tab, its SHA-256 and a newline, and reads back as it was', () => {
    const { bytes, hash } = encodeLine(entry(1, firstPrev, { message: 'tab\t newline\n \u2028 "quoted" \u00e9' }));
    expect(bytes.toString()).toMatch(/^\{"at":[\s\S]*\}\t[0-9a-f]{64}\n$/);
    expect(bytes.filter((byte) => byte === 0x0a)).toHaveLength(1);
    const parsed = parseLedger(bytes, 'ledger.jsonl');
    expect(parsed.ok && parsed.value.lines[0]).toMatchObject({
      hash,
      entry: { message: 'tab\t newline\n \u2028 "quoted" \u00e9' },
    });
  });

  it('a tail without newline is told apart from the sound part, whatever it holds', () => {
    const whole = Buffer.concat(chain(3));
    for (const tail of ['', '{', '\0\0\0\0', chain(4)[3]!.subarray(0, -1).toString()]) {
      const parsed = parseLedger(Buffer.concat([whole, Buffer.from(tail)]), 'l');
      expect(parsed.ok && [parsed.value.lines.length, parsed.value.soundBytes, parsed.value.tornBytes]).toEqual([
        3,
        whole.length,
        Buffer.byteLength(tail),
      ]);
    }
  });

  it('keeps entries of kinds that a later version adds', () => {
    const parsed = parseLedger(encodeLine({ ...entry(1, firstPrev), kind: 'later-kind' } as unknown as LedgerEntry).bytes, 'l');
    expect(parsed.ok && parsed.value.lines).toHaveLength(1);
  });

  it('names the entry at which the chain breaks', () => {
    const lines = chain(5);
    const broken = parseLedger(Buffer.concat([lines[0]!, lines[1]!, lines[3]!, lines[4]!]), 'l');
    expect(broken).toMatchObject({ ok: false, problem: { code: 'ledger-damaged', where: { line: 3 } } });
  });

  it('an entry that calls itself another number is damage, even when hash and chain fit', () => {
    const first = encodeLine(entry(1, firstPrev));
    const second = encodeLine(entry(3, first.hash));
    expect(parseLedger(Buffer.concat([first.bytes, second.bytes]), 'l')).toMatchObject({
      ok: false,
      problem: { code: 'ledger-damaged', where: { line: 2 } },
    });
  });
});
