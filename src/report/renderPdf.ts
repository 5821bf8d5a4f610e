import PDFDocument from 'pdfkit';
import { visible } from './escapeMarkup.js';
import { formatTime } from './formatNumber.js';
import { pdfFonts } from './pdfFonts.js';
import { PdfPage } from './pdfPage.js';
import type { ReportModel } from './reportModel.js';

/**
 * Draws the model as PDF/A-3b: fonts embedded, tagged, `series.json` and `ledger.jsonl` attached, bytes that repeat.
 *
 * @returns the file; every date in it is that of the record's last data entry
 * @source ISO 19005-3; pdfkit (MIT)
 */
export async function renderPdf(
  model: ReportModel,
  attachments: { readonly seriesJson: string; readonly ledgerText: string },
): Promise<Uint8Array> {
  const created = new Date(model.createdUtc);
  const document = new PDFDocument({
    size: 'A4',
    margins: { top: 74, bottom: 58, left: 50, right: 50 },
    bufferPages: true,
    pdfVersion: '1.7',
    subset: 'PDF/A-3b',
    tagged: true,
    lang: 'en-GB',
    displayTitle: true,
    font: pdfFonts.regular,
    info: {
      Title: visible(model.title),
      Author: `kinetrail ${model.program}`,
      Subject: visible(`Report ${model.reportId}`),
      CreationDate: created,
      ModDate: created,
    },
  } as unknown as PDFKit.PDFDocumentOptions);
  const bytes = collect(document);
  attach(document, 'series.json', attachments.seriesJson, 'application/json', created);
  attach(document, 'ledger.jsonl', attachments.ledgerText, 'application/jsonl', created);

  const page = new PdfPage(document);
  page.kicker(`${model.isFinal ? 'Final report' : 'Interim report'} ${model.reportId}`);
  page.heading(1, model.title);
  page.highlights(model.highlights);
  page.verdict(model.verdict);
  page.facts(model.identity);
  for (const section of model.sections) {
    page.heading(2, section.heading);
    page.blocks(section.blocks);
  }
  drawHeaders(document, model);
  document.end();
  return bytes;
}

/** Identity and page x of y on every page; drawn last, when the count is known, and marked as an artifact. */
function drawHeaders(document: PDFKit.PDFDocument, model: ReportModel): void {
  const range = document.bufferedPageRange();
  for (let index = 0; index < range.count; index += 1) {
    document.switchToPage(range.start + index);
    const { left, right } = document.page.margins;
    const width = document.page.width - left - right;
    const bottom = document.page.margins.bottom;
    document.page.margins.bottom = 0;
    document.markContent('Artifact', { type: 'Pagination' });
    document.font(pdfFonts.regular).fontSize(7.5).fillColor('#444444');
    const line = visible(
      `Batch ${model.batch}  |  report ${model.reportId}, ${model.isFinal ? 'final' : 'interim'}  |  record of ${formatTime(model.createdUtc)}  |  kinetrail ${model.program}`,
    );
    document.text(line, left, 34, { width: width - 80, lineBreak: false, ellipsis: true });
    document.text(`page ${index + 1} of ${range.count}`, left, 34, { width, align: 'right', lineBreak: false });
    document
      .moveTo(left, 48)
      .lineTo(left + width, 48)
      .lineWidth(0.5)
      .strokeColor('#999999')
      .stroke();
    document.endMarkedContent();
    document.page.margins.bottom = bottom;
  }
}

function attach(document: PDFKit.PDFDocument, name: string, text: string, type: string, created: Date): void {
  const file = document.file as (bytes: Buffer, options: object) => unknown;
  file.call(document, Buffer.from(text, 'utf8'), {
    name,
    type,
    creationDate: created,
    modifiedDate: created,
    relationship: 'Data',
    description: `${name} of this report`,
  });
}

function collect(document: PDFKit.PDFDocument): Promise<Uint8Array> {
  return new Promise((resolve, reject) => {
    const chunks: Buffer[] = [];
    document.on('data', (chunk: Buffer) => chunks.push(chunk));
    document.on('end', () => resolve(new Uint8Array(Buffer.concat(chunks))));
    document.on('error', reject);
  });
}
