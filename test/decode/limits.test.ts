import { describe, expect, it } from 'vitest';
import { limits } from '../../src/base/limits.js';
import { decodeJcamp, isCompleteJcamp } from '../../src/decode/decodeJcamp.js';
import { bytesOf, fidText, refusal, spectrumText, unwrap } from './sampleFile.js';

/** Time budget by size, with room for a busy machine: 2 s a megabyte. */
function withinBudget(text: string, run: () => void): void {
  const started = performance.now();
  run();
  expect(performance.now() - started).toBeLessThan(2000 * Math.max(1, text.length / 1e6));
}

const bomb = (token: string) => spectrumText({ form: 'AFFN' }).replace(/(\(X\+\+\(Y\.\.Y\)\)\n)[^#]*/, `$1${token}\n`);

describe('limits', () => {
  it.each(['0A1s99999999', '0A1S000000000000', `0A1J5s${'9'.repeat(30)}`, `0A1S${'0'.repeat(10_000)}`])(
    'a repeat count in %.40s costs nothing',
    (token) => {
      const before = process.memoryUsage().arrayBuffers;
      const started = performance.now();
      expect(refusal(bomb(token)).code).toBe('jcamp-repeat-limit');
      expect(performance.now() - started).toBeLessThan(1000);
      expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(16e6);
    },
  );

  it('a header that states the most points allowed allocates what the table holds', () => {
    const text = spectrumText().replace(/^##NPOINTS=.*$/m, `##NPOINTS= ${limits.pointCountMax}`);
    const before = process.memoryUsage().arrayBuffers;
    expect(refusal(text).code).toBe('jcamp-point-count');
    expect(process.memoryUsage().arrayBuffers - before).toBeLessThan(8e6);
  });

  it('points: the limit is read, one more is not', () => {
    const table = (count: number) =>
      bomb(`0@%S\n`)
        .replace(/^##(FIRSTY|MAXY|MINY)=.*\n/gm, '')
        .replace(/^##(FIRSTX|LASTX|DELTAX|XFACTOR)=.*\n/gm, '')
        .replace('##NPOINTS= 300', `##XFACTOR= 1\n##FIRSTX= 0\n##LASTX= ${count - 1}\n##NPOINTS= ${count}`)
        .replace('0@%S\n', `0@${repeat(count)}\n`);
    const repeat = (count: number) => 'STUVWXYZs'[Number(String(count)[0]) - 1] + String(count).slice(1);
    const [most] = unwrap(decodeJcamp(bytesOf(table(limits.pointCountMax)), 'most'));
    expect(unwrap(most!).real.length).toBe(limits.pointCountMax);
    expect(refusal(table(limits.pointCountMax + 1)).code).toBe('jcamp-too-many-points');
  });

  it('lines: the limit is read, one more is not', () => {
    const title = (length: number) => spectrumText({}, { title: 'x'.repeat(length - '##TITLE= '.length) });
    expect(unwrap(decodeJcamp(bytesOf(title(limits.lineLengthMax)), 'most'))[0]!.ok).toBe(true);
    expect(refusal(title(limits.lineLengthMax + 1))).toMatchObject({ code: 'jcamp-line-too-long', where: { line: 1 } });
  });

  it('labels: the limit is read, one more is not', () => {
    const own = spectrumText().match(/^##/gm)!.length;
    const labels = (count: number) => spectrumText().replace('##ORIGIN', () => `${'##X=\n'.repeat(count - own)}##ORIGIN`);
    expect(unwrap(decodeJcamp(bytesOf(labels(limits.labelCountMax)), 'most'))[0]!.ok).toBe(true);
    expect(refusal(labels(limits.labelCountMax + 1)).code).toBe('jcamp-too-many-labels');
  });

  it('nested LINK blocks: the limit is read, one more is not', () => {
    const nest = (depth: number) =>
      `${'##TITLE= l\n##DATA TYPE= LINK\n'.repeat(depth)}${spectrumText()}${'##END=\n'.repeat(depth)}`;
    expect(unwrap(decodeJcamp(bytesOf(nest(limits.linkDepthMax)), 'most'))[0]!.ok).toBe(true);
    expect(refusal(nest(limits.linkDepthMax + 1)).code).toBe('jcamp-link-depth');
  });

  it('blocks: one more than the limit is refused', () => {
    expect(refusal('##TITLE=x\n##END=\n'.repeat(limits.blockCountMax + 1)).code).toBe('jcamp-too-many-blocks');
  });

  it('a file above the size limit is refused before it is looked at', () => {
    const bytes = new Uint8Array(limits.fileSizeBytesMax + 1);
    const started = performance.now();
    const result = decodeJcamp(bytes, 'big');
    expect([result.ok, !result.ok && result.problem.code]).toEqual([false, 'jcamp-file-too-large']);
    expect(performance.now() - started).toBeLessThan(1000);
  });

  it.each([
    ['a line of 10 MB', () => `##TITLE=${'x'.repeat(10_000_000)}`],
    ['a million labels', () => `##TITLE=x\n${'##A=\n'.repeat(1_000_000)}##END=`],
    ['a million empty lines', () => `##TITLE=x\n${'\n'.repeat(1_000_000)}##END=`],
    ['a million carriage returns', () => `##TITLE=x${'\r'.repeat(1_000_000)}##END=`],
    ['a megabyte of marks', () => '#'.repeat(1_000_000)],
    ['a megabyte of blanks in a number', () => spectrumText().replace('400.13', `400.13${' '.repeat(1_000_000)}x`)],
    ['a megabyte of digits in a number', () => spectrumText().replace('400.13', '1'.repeat(1_000_000))],
    ['a megabyte of commas in a list', () => fidText().replace(/^##FACTOR=.*$/m, `##FACTOR=${', '.repeat(500_000)}`)],
    ['a megabyte of comment marks', () => spectrumText().replace('400.13', () => '$'.repeat(1_000_000))],
    ['a megabyte of blanks in a date', () => spectrumText().replace(/LONGDATE=.*$/m, `LONGDATE= 2026/${' '.repeat(1_000_000)}`)],
    ['a megabyte of table signs', () => bomb('+'.repeat(1_000_000))],
    ['a megabyte of one-point lines', () => bomb('0A1\n'.repeat(250_000))],
    ['a megabyte of table comments', () => bomb('0 1$$\n'.repeat(160_000))],
    ['ten thousand unclosed blocks', () => '##TITLE=x\n##DATA TYPE= NMR FID\n'.repeat(4000)],
  ])('%s takes linear time', (_, make) => {
    const text = make();
    const bytes = bytesOf(text);
    withinBudget(text, () => decodeJcamp(bytes, 'slow'));
    withinBudget(text, () => isCompleteJcamp(bytes));
  });
});
