import { decimalPads } from './decimalPads.js';
import { pdfFonts } from './pdfFonts.js';
import { pdfText } from './pdfText.js';
import type { Block, Column } from './reportModel.js';

type Table = Pick<Extract<Block, { kind: 'table' }>, 'caption' | 'columns' | 'rows'>;

const gap = 3;
const lineFactor = 1.18;

interface Cell {
  readonly text: string;
  readonly lines: number;
  /** Free space at the right, so that decimal points stand under each other. */
  readonly right: number;
}

/** Sets a table with tagged cells; the head repeats on every page, a row never breaks. */
export class PdfTable {
  private widths: readonly number[] = [];
  private digitWidth = 0;

  constructor(
    private readonly document: PDFKit.PDFDocument,
    private readonly left: number,
    private readonly width: number,
    private readonly points: number,
  ) {}

  draw(table: Table, hasHead: boolean): void {
    const { document } = this;
    if (table.caption !== '') this.caption(table.caption);
    this.useFont(false);
    this.digitWidth = document.widthOfString('0');
    this.widths = this.widthsOf(table);
    const pads = table.columns.map(({ align }, index) =>
      align === 'right' ? decimalPads(table.rows.map((row) => row[index] ?? '')) : [],
    );
    const structure = document.struct('Table');
    document.addStructure(structure);
    const head = table.columns.map(({ head: text }, index) => this.cellOf(text, this.widths[index]!, 0, true));
    if (hasHead) this.row(structure, head, table.columns, true);
    table.rows.forEach((cells, rowIndex) => {
      const row = table.columns.map((_, index) =>
        this.cellOf(cells[index] ?? '', this.widths[index]!, pads[index]?.[rowIndex] ?? 0, false),
      );
      if (document.y + this.heightOf(row) > document.page.height - document.page.margins.bottom) {
        document.addPage();
        if (hasHead) this.repeatHead(head, table.columns);
      }
      this.row(structure, row, table.columns, false);
    });
    structure.end();
  }

  private caption(text: string): void {
    const { document } = this;
    const caption = document.struct('Caption', {}, () => {
      this.useFont(false);
      document.fillColor('#555b61').text(pdfText(this.document, text), this.left, document.y, { width: this.width });
    });
    document.addStructure(caption);
    caption.end();
    document.y += 2;
  }

  /** Numbers and the words of the head are never broken; what is left over is shared out by weight. */
  private widthsOf({ columns, rows }: Table): number[] {
    const needed = columns.map(({ head, align }, index) => {
      this.useFont(true);
      const words = head.split(/\s+/).map((word) => this.document.widthOfString(pdfText(this.document, word)));
      this.useFont(false);
      const longest =
        align === 'right'
          ? rows.reduce((most, row) => ((row[index] ?? '').length > most.length ? (row[index] ?? '') : most), '')
          : '';
      return Math.max(12, ...words, this.document.widthOfString(pdfText(this.document, longest)) + this.digitWidth) + 2 * gap;
    });
    const total = needed.reduce((sum, width) => sum + width, 0);
    const weights = columns.reduce((sum, { weight }) => sum + weight, 0);
    const wished = columns.map(({ weight }) => (weight / weights) * this.width);
    if (total >= this.width) return needed.map((width) => (width * this.width) / total);
    const lacking = needed.reduce((sum, width, index) => sum + Math.max(0, width - wished[index]!), 0);
    const spare = needed.reduce((sum, width, index) => sum + Math.max(0, wished[index]! - width), 0);
    return wished.map((wish, index) =>
      wish <= needed[index]! ? needed[index]! : wish - ((wish - needed[index]!) * lacking) / spare,
    );
  }

  private cellOf(source: string, width: number, places: number, isHead: boolean): Cell {
    const text = pdfText(this.document, source);
    if (text === '') return { text: ' ', lines: 1, right: 0 };
    this.useFont(isHead);
    const room = width - 2 * gap;
    const length = this.document.widthOfString(text);
    const isOne = length <= room && !text.includes('\n');
    const lines = isOne
      ? 1
      : Math.ceil(this.document.heightOfString(text, { width: room }) / this.document.currentLineHeight(true) - 0.01);
    return { text, lines: Math.max(1, lines), right: isOne ? Math.min(places * this.digitWidth, room - length) : 0 };
  }

  private heightOf(cells: readonly Cell[]): number {
    return Math.max(...cells.map(({ lines }) => lines)) * this.points * lineFactor + 2 * gap;
  }

  private row(structure: PDFKit.PDFStructureElement, cells: readonly Cell[], columns: readonly Column[], isHead: boolean): void {
    const { document } = this;
    const height = this.heightOf(cells);
    const top = document.y;
    const line = document.struct('TR');
    structure.add(line);
    this.eachCell(cells, (cell, left, index) => {
      const scope = isHead ? 'Column' : index === 0 ? 'Row' : undefined;
      const options = scope !== undefined ? ({ scope } as object) : {};
      const element = document.struct(scope !== undefined ? 'TH' : 'TD', options, () =>
        this.cell(cell, columns[index]!, left, top, index, isHead),
      );
      line.add(element);
      element.end();
    });
    line.end();
    this.rule(top + height, isHead ? 0.9 : 0.35);
    document.y = top + height;
    document.x = this.left;
  }

  /** The head again on a new page, as an artifact: a reader aloud hears it once. */
  private repeatHead(head: readonly Cell[], columns: readonly Column[]): void {
    const { document } = this;
    const top = document.y;
    document.markContent('Artifact', { type: 'Layout' });
    this.eachCell(head, (cell, left, index) => this.cell(cell, columns[index]!, left, top, index, true));
    document.endMarkedContent();
    this.rule(top + this.heightOf(head), 0.9);
    document.y = top + this.heightOf(head);
  }

  private eachCell(cells: readonly Cell[], visit: (cell: Cell, left: number, index: number) => void): void {
    let left = this.left;
    cells.forEach((cell, index) => {
      visit(cell, left, index);
      left += this.widths[index]!;
    });
  }

  private cell({ text, lines, right }: Cell, { align }: Column, left: number, top: number, index: number, isHead: boolean): void {
    const { document } = this;
    this.useFont(isHead);
    document.fillColor('#1f2328');
    const width = this.widths[index]! - 2 * gap;
    if (lines > 1) {
      document.text(text, left + gap, top + gap, { width, align });
      return;
    }
    // One line needs no wrapping, which is most of the time that a table takes.
    const indent = align === 'right' ? Math.max(0, width - document.widthOfString(text) - right) : 0;
    document.text(text, left + gap + indent, top + gap, { lineBreak: false });
  }

  private rule(y: number, width: number): void {
    const { document } = this;
    document.markContent('Artifact', { type: 'Layout' });
    document
      .moveTo(this.left, y)
      .lineTo(this.left + this.width, y)
      .lineWidth(width)
      .strokeColor('#9aa1a8')
      .stroke();
    document.endMarkedContent();
  }

  private useFont(isBold: boolean): void {
    this.document.font(isBold ? pdfFonts.bold : pdfFonts.regular).fontSize(this.points);
  }
}
