import { expect, test } from 'vitest';
import { deriveReportModel } from '../../src/report/deriveReportModel.js';
import { renderHtml } from '../../src/report/renderHtml.js';
import { renderPdf } from '../../src/report/renderPdf.js';
import { buildReportInput, type FixtureSettings } from './buildReportInput.js';
import { squeeze, textOfPdf } from './textOfPdf.js';
import { textsOfModel } from './textsOfModel.js';

const cases: [string, FixtureSettings][] = [
  ['an empty', { points: 0 }],
  ['a one-point', { points: 1 }],
  ['a 30-point', { points: 30 }],
  ['a flagged', { points: 30, hasFlags: true }],
];

function textOfHtml(html: string): string {
  const body = html.slice(html.indexOf('<body>')).replace(/<(script|style)[^>]*>[\s\S]*?<\/\1>/g, '');
  return squeeze(body.replace(/<[^>]*>/g, '').replace(/&#(\d+);/g, (_, code: string) => String.fromCharCode(Number(code))));
}

test.each(cases)('every number and sentence of %s report stands in the page and on the paper', async (_, settings) => {
  const input = buildReportInput(settings);
  const model = deriveReportModel(input);
  const page = textOfHtml(renderHtml(model));
  const paper = (await textOfPdf(await renderPdf(model, input.attachments))).pages.join('');
  const texts = textsOfModel(model).map(squeeze);
  expect(texts.length).toBeGreaterThan(30);
  expect(texts.filter((text) => !page.includes(text))).toEqual([]);
  expect(texts.filter((text) => !paper.includes(text))).toEqual([]);
});

test('a number that the paper does not show is found missing by that comparison', async () => {
  const input = buildReportInput({ points: 3 });
  const model = deriveReportModel(input);
  const paper = (await textOfPdf(await renderPdf(model, input.attachments))).pages.join('');
  expect(paper.includes('98.765432')).toBe(false);
});

test('the same facts give the same bytes, page and paper', async () => {
  const draw = async () => {
    const input = buildReportInput({ points: 12, hasFlags: true });
    const model = deriveReportModel(input);
    return [renderHtml(model), Buffer.from(await renderPdf(model, input.attachments)).toString('base64')];
  };
  expect(await draw()).toEqual(await draw());
});
