import { describe, expect, it } from 'vitest';
import { decodeJcamp } from '../../src/decode/decodeJcamp.js';
import {
  bytesOf,
  decoded,
  fidFields,
  fidText,
  flagCodes,
  problemOf,
  refusal,
  spectrumFields,
  spectrumText,
  unwrap,
} from './sampleFile.js';

const link = (blocks: readonly string[], count = blocks.length) =>
  `##TITLE= all\n##JCAMP-DX= 5.01\n##DATA TYPE= LINK\n##BLOCKS= ${count}\n${blocks.join('')}##END=\n`;
const decodeAll = (text: string) => decodeJcamp(bytesOf(text), 'sample.jdx');
const peaks =
  '##TITLE= peaks\n##JCAMP-DX= 5.01\n##DATA TYPE= NMR PEAK TABLE\n##DATA CLASS= PEAK TABLE\n##PEAK TABLE= (XY..XY)\n1,2 3,4\n##END=\n';
const infrared = spectrumText().replace('NMR SPECTRUM', 'INFRARED SPECTRUM');
const three = [0, 1, 2].map((k) => fidText({}, { title: `block ${k + 1}` })) as [string, string, string];

describe('a file', () => {
  it.each([
    ['nothing', '', 'jcamp-empty', 'later'],
    ['zero bytes', 'PK\u0003\u0004\u0000\u0000', 'jcamp-not-text', 'never'],
    ['two-byte text', '\xff\xfe#\u0000#\u0000', 'jcamp-not-text', 'never'],
    ['other text', 'time;conversion\n0;0.1\n', 'jcamp-no-records', 'never'],
    ['no title', spectrumText().replace(/^##TITLE=.*\n/, ''), 'jcamp-title-first', 'never'],
    ['half of it', spectrumText().slice(0, 900), 'jcamp-truncated', 'later'],
    ['no end', spectrumText().replace('##END=\n', ''), 'jcamp-truncated', 'later'],
    ['another technique', infrared, 'jcamp-unsupported', 'never'],
    ['peaks only', peaks, 'jcamp-unsupported', 'never'],
    ['two dimensions by NTUPLES', fidText().replace('##NTUPLES= NMR FID', '##NTUPLES= nD NMR FID'), 'jcamp-unsupported', 'never'],
    [
      'two dimensions by type',
      fidText().replace('##DATA TYPE= NMR FID', '##DATA TYPE= nD NMR FID'),
      'jcamp-unsupported',
      'never',
    ],
    ['two dimensions by number', fidText().replace('##ORIGIN', '##NUM DIM= 2\n##ORIGIN'), 'jcamp-unsupported', 'never'],
    ['an empty compound file', link([]), 'jcamp-unsupported', 'never'],
  ])('that holds %s is refused', (_, text, code, retry) => {
    const problem = refusal(text);
    expect([problem.code, problem.retry, problem.where?.file, problem.area]).toEqual([code, retry, 'sample.jdx', 'decode']);
  });

  it('of another kind is refused with what was found', () => {
    expect(refusal(infrared).message).toContain('"INFRARED SPECTRUM"');
  });

  it('may hold text around its blocks: noted, not read', () => {
    const read = decoded(`sent by post\n${spectrumText()}\nbye\n`);
    expect([read.real, flagCodes(read)]).toEqual([spectrumFields.real, ['jcamp-text-before-title', 'jcamp-text-after-end']]);
    expect(flagCodes(decoded(`\n$$ exported\n${spectrumText()}\n$$ end\n`))).toEqual([]);
  });

  it('without END NTUPLES is read when both pages are complete', () => {
    const read = decoded(fidText().replace(/##END NTUPLES=.*\n/, ''));
    expect([read.imag, flagCodes(read)]).toEqual([fidFields.imag, ['jcamp-end-ntuples-missing']]);
  });
});

describe('a compound file', () => {
  it('gives one result for each block, numbered', () => {
    const blocks = unwrap(decodeAll(link(three))).map(unwrap);
    expect(blocks.map(({ block, title, flags }) => [block, title, flags])).toEqual([
      [1, 'block 1', []],
      [2, 'block 2', []],
      [3, 'block 3', []],
    ]);
  });

  it('may be nested, and count itself among its blocks', () => {
    const blocks = unwrap(decodeAll(link([three[0], link([three[1], three[2]], 3)], 3))).map(unwrap);
    expect(blocks.map(({ title, flags }) => [title, flags])).toEqual([
      ['block 1', []],
      ['block 2', []],
      ['block 3', []],
    ]);
  });

  it('passes over peak tables with a note', () => {
    const blocks = unwrap(decodeAll(link([peaks, three[0]]))).map(unwrap);
    expect(blocks.map(flagCodes)).toEqual([['jcamp-block-passed-over']]);
    expect(blocks[0]!.block).toBeUndefined();
  });

  it('refuses the block of another technique only', () => {
    const [first, second] = unwrap(decodeAll(link([three[0], infrared])));
    expect([first!.ok, problemOf(second!).code]).toEqual([true, 'jcamp-unsupported']);
  });

  it.each([
    ['a changed digit', (text: string) => text.replace(/^(1\d[A-I]\d*)/m, '$17'), 'jcamp-check-ordinate'],
    ['a label without equals sign', (text: string) => text.replace('##ORIGIN=', '##ORIGIN'), 'jcamp-record-malformed'],
    ['a lost end', (text: string) => text.replace(/##END=\n$/, ''), 'jcamp-block-not-closed'],
    ['half of it lost', (text: string) => text.slice(0, text.lastIndexOf('\n', text.length / 2) + 1), 'jcamp-block-not-closed'],
  ])('with %s in the middle goes on with the others', (_, damage, code) => {
    const damaged = damage(three[1]);
    expect(damaged).not.toBe(three[1]);
    const results = unwrap(decodeAll(link([three[0], damaged, three[2]])));
    expect(results.map(({ ok }) => ok)).toEqual([true, false, true]);
    expect(problemOf(results[1]!).code).toBe(code);
    expect(unwrap(results[2]!)).toMatchObject({ block: 3, title: 'block 3' });
  });

  it('that lost a title says that a block is not whole', () => {
    const results = unwrap(decodeAll(link([three[0], three[1].replace(/^##TITLE=.*\n/, ''), three[2]])));
    expect(results.map((result) => (result.ok ? result.value.title : result.problem.code)).sort()).toEqual([
      'block 1',
      'block 3',
      'jcamp-structure',
    ]);
  });

  it('that lost a whole block is flagged', () => {
    const blocks = unwrap(decodeAll(link([three[0], three[2]], 4))).map(unwrap);
    expect(blocks.map(({ flags }) => flags[0])).toMatchObject([
      { code: 'jcamp-block-count', weight: 'flag' },
      { code: 'jcamp-block-count', weight: 'flag' },
    ]);
  });

  it('cut off gives its whole blocks and one refusal', () => {
    const text = link(three);
    const results = unwrap(decodeAll(text.slice(0, text.lastIndexOf('##PAGE'))));
    expect(results.map((result) => (result.ok ? result.value.block : result.problem.code))).toEqual([1, 2, 'jcamp-truncated']);
    const between = unwrap(decodeAll(text.replace(/##END=\n$/, '')));
    expect(between.map((result) => (result.ok ? result.value.block : result.problem.code))).toEqual([1, 2, 3, 'jcamp-truncated']);
  });
});
