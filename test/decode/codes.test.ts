import { readdirSync, readFileSync } from 'node:fs';
import { join } from 'node:path';
import { describe, expect, it } from 'vitest';
import { jcampCodes } from '../../src/decode/codes.js';

const folder = join(import.meta.dirname, '..', '..', 'src', 'decode');
const sources = readdirSync(folder)
  .filter((name) => name !== 'codes.ts')
  .map((name) => readFileSync(join(folder, name), 'utf8'))
  .join('\n');

describe('the codes of decode', () => {
  it('are unique, and each is given somewhere', () => {
    const codes = jcampCodes.map(({ code }) => code);
    expect(new Set(codes).size).toBe(codes.length);
    expect(codes.filter((code) => !sources.includes(`'${code}'`))).toEqual([]);
  });

  it('refuse where they are refusals, and are tolerated where they are not', () => {
    const refused = new Set([...sources.matchAll(/refuse\(\s*'(jcamp-[a-z-]+)'/g)].map(([, code]) => code));
    const said = new Set([...sources.matchAll(/tolerated\(\s*'(jcamp-[a-z-]+)'/g)].map(([, code]) => code));
    const kindOf = new Map<string | undefined, string>(jcampCodes.map(({ code, kind }) => [code, kind]));
    expect([...refused].filter((code) => kindOf.get(code) !== 'refusal')).toEqual([]);
    expect([...said].filter((code) => !['note', 'flag'].includes(kindOf.get(code) ?? ''))).toEqual([]);
  });
});
