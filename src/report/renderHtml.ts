import { createHash } from 'node:crypto';
import { escapeMarkup } from './escapeMarkup.js';
import { fillTemplate, type TemplateValues } from './fillTemplate.js';
import { formatTime } from './formatNumber.js';
import { renderBlocks } from './html/renderBlock.js';
import type { ReportModel } from './reportModel.js';
import { shippedTemplates, type TemplateSet } from './templateSet.js';

/**
 * The report as one HTML file that opens offline and is whole without script. The script only adds comfort.
 *
 * @returns the page; nothing in it may load or send anything, which its content policy says to the browser too
 */
export function renderHtml(model: ReportModel, templates: TemplateSet = shippedTemplates()): string {
  const body = fillTemplate(templates.reportPage, valuesOf(model));
  const traces = model.traces ? `<script type="application/json" id="traces">${jsonForPage(model.traces)}</script>` : '';
  return pageOf({
    title: `${model.title}: ${model.isFinal ? 'final' : 'interim'} report`,
    body: `${body}\n${traces}`,
    style: templates.reportStyle,
    script: templates.script,
  });
}

function valuesOf(model: ReportModel): TemplateValues {
  return {
    title: model.title,
    reportId: model.reportId,
    state: model.isFinal ? 'final' : 'interim',
    created: formatTime(model.createdUtc),
    program: model.program,
    batch: model.batch,
    identity: model.identity.map(([label, value]) => ({ label, value })),
    highlights: model.highlights.map(({ label, value, detail, tone }) => ({ label, value, detail, tone })),
    verdict: model.verdict.map((sentence) => ({ sentence })),
    sections: model.sections.map(({ id, heading, blocks }) => ({ id, heading, blocks: { markup: renderBlocks(blocks) } })),
  };
}

/** A page around a body: character set, content policy with the hashes of its own style and script, nothing from outside. */
export function pageOf({
  title,
  body,
  style,
  script,
  refreshS,
}: {
  readonly title: string;
  readonly body: string;
  readonly style: string;
  readonly script?: string;
  readonly refreshS?: number;
}): string {
  const policy = [
    "default-src 'none'",
    `style-src ${hashOf(style)}`,
    ...(script !== undefined ? [`script-src ${hashOf(script)}`] : []),
    "base-uri 'none'",
    "form-action 'none'",
  ].join('; ');
  return `<!doctype html>
<html lang="en">
<head>
<meta charset="utf-8">
<meta http-equiv="Content-Security-Policy" content="${policy}">
<meta name="viewport" content="width=device-width, initial-scale=1">
<meta name="color-scheme" content="light dark">
<meta name="referrer" content="no-referrer">
${refreshS !== undefined ? `<noscript><meta http-equiv="refresh" content="${refreshS}"></noscript>\n` : ''}<title>${escapeMarkup(title)}</title>
<style>${style}</style>
</head>
<body>
${body}
${script !== undefined ? `<script>${script}</script>\n` : ''}</body>
</html>
`;
}

function hashOf(text: string): string {
  return `'sha256-${createHash('sha256').update(text).digest('base64')}'`;
}

/** JSON inside a page: no character in it can end the element that holds it. */
function jsonForPage(value: unknown): string {
  return JSON.stringify(value).replace(/[<>&\u2028\u2029]/g, (c) => `\\u${c.charCodeAt(0).toString(16).padStart(4, '0')}`);
}
