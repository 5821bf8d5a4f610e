import { describe, expect, it } from 'vitest';
import { parseDate } from '../../src/decode/parseDate.js';

const iso = (text: string, time?: string) => {
  const parsed = parseDate(text, time);
  return typeof parsed === 'string' ? parsed : parsed.iso;
};

describe('parseDate', () => {
  it.each([
    ['2026/03/14 19:31:00', '2026-03-14T19:31:00Z'],
    ['1997/08/29  16:47:44.00  +0500', '1997-08-29T11:47:44Z'],
    ['2023/10/08 11:01:32-0400', '2023-10-08T15:01:32Z'],
    ['2026/03/14 19:31:00.250+0000', '2026-03-14T19:31:00.25Z'],
    ['2026-03-14T19:31:00Z', '2026-03-14T19:31:00Z'],
    ['2026-03-14T19:31:00,5+01:00', '2026-03-14T18:31:00.5Z'],
    ['2026-03-14 19:31', '2026-03-14T19:31:00Z'],
    ['2026-12-31 23:30:00 -0100', '2027-01-01T00:30:00Z'],
    ['14/03/2026 19:31:00', '2026-03-14T19:31:00Z'],
    ['14-03-2026 19:31:00 +0100', '2026-03-14T18:31:00Z'],
    ['04.03.2026 19:31:00', '2026-03-04T19:31:00Z'],
    ['03/14/2026 19:31:00', '2026-03-14T19:31:00Z'],
    ['05/05/2026 19:31:00', '2026-05-05T19:31:00Z'],
    ['14-MAR-2026 19:31:00', '2026-03-14T19:31:00Z'],
    ['14 March 2026 19:31:00', '2026-03-14T19:31:00Z'],
    ['2026-Mar-14 19:31:00', '2026-03-14T19:31:00Z'],
    ['Mon Feb 01 15:24:11 2021', '2021-02-01T15:24:11Z'],
    ['Sat, 14 Mar 2026 19:31:00 GMT', '2026-03-14T19:31:00Z'],
    ['2024/02/29 00:00:00', '2024-02-29T00:00:00Z'],
    ['2026/03/14', '2026-03-14T00:00:00Z'],
  ])('reads %s', (text, expected) => {
    expect(iso(text)).toBe(expected);
  });

  it('joins a separate time', () => {
    expect(iso('2026/03/14', '19:31:00')).toBe('2026-03-14T19:31:00Z');
  });

  it.each([
    ['03/04/2026 19:31:00', 'ambiguous'],
    ['3-4-2026', 'ambiguous'],
    ['26/03/14', 'unreadable'],
    ['2026/02/29 10:00:00', 'unreadable'],
    ['2026/13/01', 'unreadable'],
    ['32/01/2026', 'unreadable'],
    ['14 Foo 2026 10:00:00', 'unreadable'],
    ['2026/03/14 24:00:00', 'unreadable'],
    ['2026/03/14 10:61:00', 'unreadable'],
    ['2026/03/14 10:00:00 +2500', 'unreadable'],
    ['2026/03-14', 'unreadable'],
    ['yesterday', 'unreadable'],
    ['', 'unreadable'],
    ['1'.repeat(100_000), 'unreadable'],
  ])('does not guess %s', (text, expected) => {
    expect(parseDate(text)).toBe(expected);
  });

  it('tells whether a time and a zone were given', () => {
    expect(parseDate('2026/03/14')).toMatchObject({ hasTime: false, hasZone: false });
    expect(parseDate('2026/03/14 10:00:00')).toMatchObject({ hasTime: true, hasZone: false });
    expect(parseDate('2026/03/14 10:00:00+0000')).toMatchObject({ hasTime: true, hasZone: true });
  });
});
