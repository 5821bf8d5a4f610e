import { execFileSync } from 'node:child_process';
import { mkdtempSync, readFileSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, beforeAll, describe, expect, test } from 'vitest';
import { deriveReportModel } from '../../src/report/deriveReportModel.js';
import { renderPdf } from '../../src/report/renderPdf.js';
import { buildReportInput } from './buildReportInput.js';
import { textOfPdf } from './textOfPdf.js';

const folder = mkdtempSync(join(tmpdir(), 'report-pdf-'));
const file = join(folder, 'report.pdf');
const input = buildReportInput({ points: 60, hasFlags: true });
let bytes: Uint8Array;
beforeAll(async () => {
  bytes = await renderPdf(deriveReportModel(input), input.attachments);
  writeFileSync(file, bytes);
});
afterAll(() => rmSync(folder, { recursive: true, force: true }));

const raw = () => Buffer.from(bytes).toString('latin1');

function has(tool: string): boolean {
  try {
    execFileSync('which', [tool], { stdio: 'ignore' });
    return true;
  } catch {
    process.stderr.write(`SKIPPED: ${tool} is not installed; a check of the PDF was left out\n`);
    return false;
  }
}

const run = (tool: string, args: string[]) => execFileSync(tool, args, { encoding: 'utf8' });

describe('for the archive (ISO 19005-3)', () => {
  test('the metadata claim part 3, conformance B, and carry title and the record date', async () => {
    const { metadata } = await textOfPdf(bytes);
    expect(metadata).toMatch(/<pdfaid:part>3<\/pdfaid:part>/);
    expect(metadata).toMatch(/<pdfaid:conformance>B<\/pdfaid:conformance>/);
    expect(metadata).toContain('Acetylation of benzyl alcohol');
    expect(metadata).toContain('2026-03-15');
  });

  test('there is an output intent, no script, no encryption, no action on opening', () => {
    expect(raw()).toContain('/GTS_PDFA1');
    for (const word of ['/JavaScript', '/JS ', '/Encrypt', '/OpenAction', '/Launch', '/AA ']) expect(raw()).not.toContain(word);
  });

  test('it is tagged, with a language and a title that is displayed', () => {
    expect(raw()).toContain('/Marked true');
    expect(raw()).toMatch(/\/Lang \(en-GB\)/);
    expect(raw()).toContain('/DisplayDocTitle true');
  });

  test('headings, header cells, rows, figures and captions are tagged, and every figure has words', async () => {
    const { tags } = await textOfPdf(bytes);
    for (const tag of ['H1', 'H2', 'H3', 'Table', 'TR', 'TH', 'TD', 'Figure', 'Caption']) expect(tags).toContain(tag);
    const figures = raw().split('/S /Figure').length - 1;
    expect(figures).toBeGreaterThan(6);
    expect(raw().split('/Alt ').length - 1).toBe(figures);
  });

  test('both attachments say how they belong to the report', () => {
    expect(raw().split('/AFRelationship /Data').length - 1).toBe(2);
    expect(raw()).toMatch(/\/AF \[/);
  });
});

test('every page names the batch, the report, the time of the record, the program and its number of all', async () => {
  const { pages } = await textOfPdf(bytes);
  expect(pages.length).toBeGreaterThan(2);
  pages.forEach((page, index) => {
    for (const words of ['BatchLOT-7731', 'reportBX-0417-62-', 'interim', '2026-03-1504:10:00UTC', 'kinetrail0.1.0'])
      expect(page).toContain(words);
    expect(page).toContain(`page${index + 1}of${pages.length}`);
  });
});

test('a table that goes over a page begins with its head again', async () => {
  const { pages } = await textOfPdf(bytes);
  const withPoints = pages.filter((page) => /tp-0\d\d\.jdx\d/.test(page) && page.includes('driftppm') === false);
  const heads = pages.filter((page) => page.includes('fileelapsedconversionu'));
  expect(heads.length).toBeGreaterThan(1);
  expect(withPoints.length).toBeGreaterThan(0);
});

test('characters that the fonts lack are written out, so that no empty box is drawn', async () => {
  const strange = buildReportInput({ points: 2, text: 'night \u{1f319} \u4e2d' });
  const { pages } = await textOfPdf(await renderPdf(deriveReportModel(strange), strange.attachments));
  expect(pages.join('')).toContain('\\u{1f319}\\u{4e2d}');
});

test.skipIf(!has('qpdf'))('qpdf finds no fault in it', () => {
  expect(run('qpdf', ['--check', file])).toContain('No syntax or stream encoding errors found');
});

test.skipIf(!has('pdffonts'))('every font is embedded and subset', () => {
  const rows = run('pdffonts', [file]).trim().split('\n').slice(2);
  expect(rows.length).toBeGreaterThan(1);
  for (const row of rows) expect(row).toMatch(/yes\s+yes\s+yes\s+\d+\s+\d+$/);
});

test.skipIf(!has('pdfdetach'))('the attachments come out byte for byte', () => {
  run('pdfdetach', ['-saveall', '-o', folder, file]);
  expect(readFileSync(join(folder, 'series.json'), 'utf8')).toBe(input.attachments.seriesJson);
  expect(readFileSync(join(folder, 'ledger.jsonl'), 'utf8')).toBe(input.attachments.ledgerText);
});

test.skipIf(!has('pdftotext'))(
  'read aloud, the title comes first, then the verdict, the curve, the points and at last the cautions',
  () => {
    const text = run('pdftotext', ['-raw', file, '-']);
    const places = [
      'Acetylation of benzyl alcohol, batch',
      'Conversion against time',
      'Time points by time',
      'All files',
      'How to verify',
      'safety function',
    ].map((words) => text.indexOf(words));
    expect(places.every((place) => place >= 0)).toBe(true);
    expect([...places].sort((a, b) => a - b)).toEqual(places);
  },
);
