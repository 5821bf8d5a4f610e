import type { RunFacts } from '../record/runFacts.js';
import { deriveReportModel } from './deriveReportModel.js';
import { renderHtml } from './renderHtml.js';
import { renderPdf } from './renderPdf.js';
import { reportInputOf } from './reportInputOf.js';
import { shippedTemplates, type TemplateSet } from './templateSet.js';

/**
 * Draws a run's report from its facts: the same facts give the same bytes.
 *
 * @param templates the shipped pages, or a site's own (`readTemplates`)
 */
export async function renderReport(
  facts: RunFacts,
  templates: TemplateSet = shippedTemplates(),
): Promise<{ html: string; pdf: Uint8Array }> {
  const input = reportInputOf(facts);
  const model = deriveReportModel(input);
  return { html: renderHtml(model, templates), pdf: await renderPdf(model, input.attachments) };
}
