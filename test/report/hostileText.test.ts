import { expect, test } from 'vitest';
import { deriveReportModel } from '../../src/report/deriveReportModel.js';
import { indexCard } from '../../src/report/indexCard.js';
import { renderHtml } from '../../src/report/renderHtml.js';
import { renderIndex } from '../../src/report/renderIndex.js';
import { renderPdf } from '../../src/report/renderPdf.js';
import { buildReportInput } from './buildReportInput.js';
import { textOfPdf } from './textOfPdf.js';

const texts = [
  '<script>alert(1)</script>',
  '"><img src=x onerror=alert(1)>',
  '</style></svg></title><script>alert(1)</script>',
  '</script><!--<script>',
  "{{title}} {{#sections}} ' onload='x",
  '\u202egnp.exe \u0000\u001b[31m \ud800 \u2028',
];

/** Elements and attribute names of a page without any text or value: what a browser would act on. */
function bones(html: string): string {
  const body = html.slice(html.indexOf('<body>')).replace(/<(script|style)[^>]*>[\s\S]*?<\/\1>/g, '');
  return body.replace(/"[^"]*"/g, '""').replace(/>[^<]*</g, '><');
}

test.each(texts)('F54 text from files stays text on the page: %j', (text) => {
  const html = renderHtml(deriveReportModel(buildReportInput({ points: 8, text, hasFlags: true })));
  expect(html.split('<script').length - 1).toBe(2);
  expect(bones(html)).not.toMatch(/<img|<!--|on[a-z]+=/);
  expect(bones(html).length).toBeGreaterThan(1000);
  expect(html).not.toMatch(/[\u0000-\u0008\u001b\u202e\u2028]/);
  expect(html.split('</style>').length - 1).toBe(1);
});

test.each(texts)('F55 text from files draws a whole PDF: %j', async (text) => {
  const input = buildReportInput({ points: 4, text, hasFlags: true });
  const { pages } = await textOfPdf(await renderPdf(deriveReportModel(input), input.attachments));
  expect(pages.length).toBeGreaterThan(1);
});

test.each(texts)('F56 names of runs stay text on the page of all runs: %j', (text) => {
  const { series } = buildReportInput({ points: 3, text });
  const html = renderIndex([indexCard(series, [Buffer.from('a b'), Buffer.from(text)], text, 0.98)], '2026-03-15T04:10:00Z');
  expect(bones(html)).not.toMatch(/<img|on[a-z]+=/);
  expect(html).not.toMatch(/href="(?!a%20b\/)/);
});

test('a very long name is clipped with a mark and does not swell the report', () => {
  const html = renderHtml(deriveReportModel(buildReportInput({ points: 3, text: 'x'.repeat(100_000) })));
  expect(html).toContain('...(clipped)');
});
