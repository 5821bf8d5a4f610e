import type { RunFacts } from '../record/runFacts.js';
import { deriveReportModel } from './deriveReportModel.js';
import { loadTemplate } from './loadTemplate.js';
import { renderHtml } from './renderHtml.js';
import { renderPdf } from './renderPdf.js';
import { reportInputOf } from './reportInputOf.js';

/** Draws a run's report from its facts: the same facts give the same bytes. */
export async function renderReport(facts: RunFacts, siteTemplates?: string): Promise<{ html: string; pdf: Uint8Array }> {
  const input = reportInputOf(facts);
  const model = deriveReportModel(input);
  return { html: renderHtml(model, loadTemplate('report.css', siteTemplates)), pdf: await renderPdf(model, input.attachments) };
}
