import { drawSvg } from './drawSvg.js';
import { pdfFonts } from './pdfFonts.js';
import { PdfTable } from './pdfTable.js';
import { captionOf, pdfText } from './pdfText.js';
import type { Block, Highlight } from './reportModel.js';

type Document = PDFKit.PDFDocument;
type Figure = Extract<Block, { kind: 'figure' }>;

const ink = '#1f2328';
const soft = '#555b61';
const toneColors = { good: '#00694c', look: '#9a4200', plain: '#0072B2' } as const;
const size = { body: 9.2, small: 7.4, h1: 17, h2: 12.5, lead: 10.5 } as const;

/** Sets blocks one below the other, with page breaks that widow no heading. Every piece is tagged. */
export class PdfPage {
  constructor(private readonly document: Document) {}

  private get left(): number {
    return this.document.page.margins.left;
  }
  private get width(): number {
    return this.document.page.width - this.document.page.margins.left - this.document.page.margins.right;
  }
  private get bottom(): number {
    return this.document.page.height - this.document.page.margins.bottom;
  }

  /** Starts a new page when less than this is left. */
  private need(height: number): void {
    if (this.document.y + height > this.bottom) this.document.addPage();
  }

  private tagged(tag: string, draw: () => void, alt?: string): void {
    const structure = this.document.struct(tag as 'P', alt !== undefined ? { alt } : {}, draw);
    this.document.addStructure(structure);
    structure.end();
  }

  private paragraph(
    tag: string,
    text: string,
    font: string,
    points: number,
    color: string,
    options: PDFKit.Mixins.TextOptions = {},
  ): void {
    this.tagged(tag, () => {
      this.document
        .font(font)
        .fontSize(points)
        .fillColor(color)
        .text(pdfText(this.document, text), this.left, this.document.y, { width: this.width, ...options });
    });
  }

  kicker(text: string): void {
    this.paragraph('P', text, pdfFonts.regular, size.body, soft);
  }

  heading(level: 1 | 2, text: string): void {
    if (level === 2) {
      this.need(110);
      this.document.moveDown(1.1);
    }
    this.paragraph(`H${level}`, text, pdfFonts.bold, level === 1 ? size.h1 : size.h2, ink);
    this.document.moveDown(0.4);
  }

  /** The few large answers, side by side. */
  highlights(highlights: readonly Highlight[]): void {
    if (highlights.length === 0) return;
    const { document } = this;
    document.moveDown(0.8);
    const gap = 12;
    const width = (this.width - gap * (highlights.length - 1)) / highlights.length;
    const top = document.y;
    let bottom = top;
    highlights.forEach(({ label, value, detail, tone }, index) => {
      const left = this.left + index * (width + gap);
      this.tagged('P', () => {
        const say = (text: string, font: string, points: number, color: string, y: number) =>
          document
            .font(font)
            .fontSize(points)
            .fillColor(color)
            .text(pdfText(document, text), left + 9, y, { width: width - 9 });
        say(label, pdfFonts.regular, size.small, soft, top);
        say(value, pdfFonts.bold, value.length > 13 ? 11 : 14, ink, document.y + 1);
        say(detail, pdfFonts.regular, size.small, soft, document.y + 1);
      });
      bottom = Math.max(bottom, document.y);
      this.bar(left, top, document.y - top, toneColors[tone]);
    });
    document.x = this.left;
    document.y = bottom + 8;
  }

  private bar(left: number, top: number, height: number, color: string): void {
    this.document.markContent('Artifact', { type: 'Layout' });
    this.document.rect(left, top, 2.5, height).fill(color);
    this.document.endMarkedContent();
  }

  verdict(sentences: readonly string[]): void {
    this.document.moveDown(0.3);
    const top = this.document.y;
    sentences.forEach((sentence, index) => {
      this.need(30);
      this.tagged('P', () => {
        this.document
          .font(index === 0 ? pdfFonts.bold : pdfFonts.regular)
          .fontSize(index === 0 ? size.lead : size.body)
          .fillColor(ink);
        this.document.text(pdfText(this.document, sentence), this.left + 12, this.document.y, {
          width: this.width - 12,
          paragraphGap: 3,
        });
      });
    });
    if (this.document.y > top) {
      this.bar(this.left, top, this.document.y - top, toneColors.plain);
    }
    this.document.moveDown(0.6);
  }

  facts(facts: readonly (readonly [string, string])[]): void {
    const table = {
      kind: 'table' as const,
      caption: '',
      columns: [
        { head: '', align: 'left' as const, weight: 1.3 },
        { head: '', align: 'left' as const, weight: 5 },
      ],
      rows: facts.map(([label, value]) => [label, value]),
    };
    new PdfTable(this.document, this.left, this.width, size.body).draw(table, false);
    this.document.moveDown(0.5);
  }

  /** Figures that stand side by side are gathered into rows; everything else stands alone. */
  blocks(blocks: readonly Block[]): void {
    let row: Figure[] = [];
    const flush = () => {
      if (row.length > 0) this.figureRow(row, row[0]!.perRow!);
      row = [];
    };
    blocks.forEach((block, index) => {
      if (block.kind === 'figure' && block.perRow !== undefined) {
        if (row.length > 0 && row[0]!.perRow !== block.perRow) flush();
        row.push(block);
        if (row.length === block.perRow) flush();
        return;
      }
      flush();
      this.block(block, blocks[index + 1]);
    });
    flush();
  }

  private block(block: Block, next: Block | undefined): void {
    switch (block.kind) {
      case 'subheading':
        // A heading stays with what it heads: the row of figures below it is the tallest.
        this.need(next?.kind === 'figure' ? 270 : 60);
        this.document.moveDown(0.6);
        this.paragraph('H3', block.text, pdfFonts.bold, 10, ink);
        this.document.moveDown(0.3);
        return;
      case 'text':
        this.need(26);
        this.paragraph('P', block.text, pdfFonts.regular, size.body, block.tone === 'note' ? soft : ink, { paragraphGap: 4 });
        return;
      case 'list':
        for (const item of block.items) {
          this.need(20);
          this.paragraph('P', `\u2022 ${item}`, pdfFonts.regular, size.body, ink, { paragraphGap: 2 });
        }
        this.document.moveDown(0.3);
        return;
      case 'facts':
        this.facts(block.facts);
        return;
      case 'code':
        for (const line of block.text.split('\n')) {
          this.need(12);
          this.paragraph('P', line === '' ? ' ' : line, pdfFonts.mono, 6.8, ink);
        }
        this.document.moveDown(0.5);
        return;
      case 'table':
        this.need(60);
        new PdfTable(this.document, this.left, this.width, block.small ? size.small : size.body).draw(block, true);
        this.document.moveDown(0.7);
        return;
      case 'figure':
        this.figure(block);
    }
  }

  private figure(block: Figure): void {
    const height = (block.heightPx * this.width) / block.widthPx;
    this.need(height + 34);
    this.drawing(block, this.left, this.document.y, this.width);
    this.document.y += height + 2;
    this.paragraph('Caption', `${block.title}. ${block.description}`, pdfFonts.regular, size.small, soft, { paragraphGap: 6 });
  }

  private figureRow(figures: readonly Figure[], perRow: number): void {
    const gap = 14;
    const width = (this.width - gap * (perRow - 1)) / perRow;
    const heights = figures.map((figure) => (figure.heightPx * width) / figure.widthPx);
    const captions = figures.map((figure) =>
      this.document
        .font(pdfFonts.regular)
        .fontSize(size.small)
        .heightOfString(pdfText(this.document, captionOf(figure)), { width }),
    );
    const total = Math.max(...heights.map((height, index) => height + captions[index]! + 12));
    this.need(total);
    const top = this.document.y;
    figures.forEach((figure, index) => {
      const left = this.left + index * (width + gap);
      this.drawing(figure, left, top, width);
      this.tagged('Caption', () => {
        this.document
          .font(pdfFonts.regular)
          .fontSize(size.small)
          .fillColor(soft)
          .text(pdfText(this.document, captionOf(figure)), left, top + heights[index]! + 2, { width });
      });
    });
    this.document.x = this.left;
    this.document.y = top + total;
  }

  private drawing(block: Figure, left: number, top: number, width: number): void {
    this.tagged(
      'Figure',
      () => {
        drawSvg(this.document, block.svg, { left, top, scale: width / block.widthPx }, pdfFonts.regular);
      },
      captionOf(block),
    );
  }
}
