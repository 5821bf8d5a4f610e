import { mkdtempSync, rmSync, writeFileSync } from 'node:fs';
import { tmpdir } from 'node:os';
import { join } from 'node:path';
import { afterAll, expect, test } from 'vitest';
import { deriveReportModel } from '../../src/report/deriveReportModel.js';
import { fillTemplate } from '../../src/report/fillTemplate.js';
import { renderHtml } from '../../src/report/renderHtml.js';
import { requireSafeTemplate } from '../../src/report/requireSafeTemplate.js';
import { readTemplates } from '../../src/report/templateSet.js';
import { buildReportInput } from './buildReportInput.js';

const folder = mkdtempSync(join(tmpdir(), 'templates-'));
afterAll(() => rmSync(folder, { recursive: true, force: true }));

test('a template fills names escaped, repeats lists, and shows or hides sections', () => {
  const template = '{{a}}{{#list}}[{{x}}{{#deep}}{{y}}{{/deep}}]{{/list}}{{^none}}nothing{{/none}}{{#yes}}!{{/yes}}';
  const values = {
    a: '<b>',
    list: [
      { x: '1', deep: [{ y: 'p' }, { y: 'q' }] },
      { x: '2', deep: [] },
    ],
    none: [],
    yes: true,
  };
  expect(fillTemplate(template, values)).toBe('&#60;b&#62;[1pq][2]nothing!');
});

test('a template runs no code, whatever language it is written in', () => {
  const attempts = [
    "<% require('fs').writeFileSync('x','') %>",
    '{{constructor}}',
    '{{__proto__}}',
    '$' + '{process.exit(1)}',
    '{{= 7*7 }}',
  ];
  for (const attempt of attempts) {
    const text = fillTemplate(attempt, { a: 'b' });
    expect(text).not.toContain('49');
    expect([attempt, '']).toContain(text);
  }
});

test.each([
  '<script>fetch("//x")</script>',
  '<img src="http://127.0.0.1:9/x">',
  '<p onclick="x()">',
  '<svg/onload=x()>',
  '<meta http-equiv="refresh" content="0;url=http://127.0.0.1/">',
  '<a href="http://127.0.0.1/?{{batch}}">',
  '<form action="/x">',
  '<a href="javascript:x()">',
  'body{background:url(http://127.0.0.1/x)}',
  '@import "x.css";',
  '</style><p>',
])('a template that could load, run or send is refused: %s', (text) => {
  const result = requireSafeTemplate(`line one\n${text}`, 'report.html');
  expect(result.ok).toBe(false);
  if (!result.ok) expect(result.problem).toMatchObject({ code: 'template-unsafe', where: { file: 'report.html', line: 2 } });
});

test('the templates shipped with the program pass their own check', () => {
  expect(readTemplates(join(import.meta.dirname, '..', '..', 'templates')).ok).toBe(true);
});

test("a site's own page stands in place of the shipped one, and the content policy stays", () => {
  writeFileSync(join(folder, 'report.html'), '<main><h1>{{title}} of our site</h1>{{#sections}}{{blocks}}{{/sections}}</main>');
  const set = readTemplates(folder);
  if (!set.ok) throw new Error(set.problem.message);
  const html = renderHtml(deriveReportModel(buildReportInput({ points: 2 })), set.value);
  expect(html).toContain('batch LOT-7731 of our site');
  expect(html).toContain("default-src 'none'");
});

test('a hostile page in a template folder is refused before anything is drawn', () => {
  writeFileSync(join(folder, 'report.html'), '<main>{{title}}<script src="x.js"></script></main>');
  const set = readTemplates(folder);
  expect(set.ok).toBe(false);
});
