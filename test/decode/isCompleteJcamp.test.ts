import { describe, expect, it } from 'vitest';
import { isCompleteJcamp } from '../../src/decode/decodeJcamp.js';
import { bytesOf, fidText, spectrumText } from './sampleFile.js';

const isComplete = (text: string) => isCompleteJcamp(bytesOf(text));
const link = (blocks: string[]) =>
  `##TITLE= all\n##JCAMP-DX= 5.01\n##DATA TYPE= LINK\n##BLOCKS= ${blocks.length}\n${blocks.join('')}##END=\n`;

describe('isCompleteJcamp', () => {
  it.each([
    ['a whole file', spectrumText()],
    ['CR LF', spectrumText({ lineEnd: '\r\n' })],
    ['CR', spectrumText({ lineEnd: '\r' })],
    ['no final line end', spectrumText().trimEnd()],
    ['blanks and comments after the end', `${spectrumText()}  \n$$ done\n\n`],
    ['a comment on the line', spectrumText().replace('##END=', '##END= $$ done')],
    ['blanks before the mark and in the label', spectrumText().replace('##END=', '  ## E N D =')],
    ['a byte order mark', `\xef\xbb\xbf${spectrumText()}`],
    ['a compound file', link([spectrumText(), fidText()])],
  ])('is true for %s', (_, text) => {
    expect(isComplete(text)).toBe(true);
  });

  it.each([
    ['nothing', ''],
    ['a bare end of the tables', fidText().replace('##END=\n', '')],
    ['an end without its equals sign', spectrumText().trimEnd().slice(0, -1)],
    ['text after the end', `${spectrumText()}123`],
    ['a compound file that stops between blocks', link([spectrumText(), fidText()]).replace(/##END=\n$/, '')],
  ])('is false for %s', (_, text) => {
    expect(isComplete(text)).toBe(false);
  });

  it('is false for every cut of a file', () => {
    const text = fidText().trimEnd();
    for (let length = 0; length < text.length; length += 7) expect(isComplete(text.slice(0, length))).toBe(false);
    expect(isComplete(text.slice(0, -1))).toBe(false);
  });
});
