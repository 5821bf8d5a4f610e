import { visible } from './escapeMarkup.js';
import type { Block, Column } from './reportModel.js';

type Table = Pick<Extract<Block, { kind: 'table' }>, 'caption' | 'columns' | 'rows'>;

const pad = 3;

/** Sets a table with tagged cells; the head repeats on every page, a row never breaks. */
export class PdfTable {
  constructor(
    private readonly document: PDFKit.PDFDocument,
    private readonly left: number,
    private readonly width: number,
  ) {}

  draw(table: Table, points: number, hasHead: boolean): void {
    const { document } = this;
    if (table.caption !== '') {
      const caption = document.struct('Caption', {}, () => {
        document
          .font('regular')
          .fontSize(points)
          .fillColor('#555b61')
          .text(visible(table.caption), this.left, document.y, { width: this.width });
      });
      document.addStructure(caption);
      caption.end();
      document.y += 2;
    }
    const structure = document.struct('Table');
    document.addStructure(structure);
    const widths = this.widthsOf(table.columns);
    if (hasHead)
      this.row(
        structure,
        table.columns.map(({ head }) => head),
        table.columns,
        widths,
        points,
        'TH',
      );
    for (const cells of table.rows) {
      const height = this.heightOf(cells, widths, points, false);
      if (document.y + height > document.page.height - document.page.margins.bottom) {
        document.addPage();
        if (hasHead) this.repeatHead(table, widths, points);
      }
      this.row(structure, cells, table.columns, widths, points, 'TD');
    }
    structure.end();
  }

  private widthsOf(columns: readonly Column[]): number[] {
    const total = columns.reduce((sum, { weight }) => sum + weight, 0);
    return columns.map(({ weight }) => (weight / total) * this.width);
  }

  private heightOf(cells: readonly string[], widths: readonly number[], points: number, isHead: boolean): number {
    this.document.font(isHead ? 'bold' : 'regular').fontSize(points);
    return (
      Math.max(
        ...cells.map((cell, index) =>
          this.document.heightOfString(breakable(cell) || ' ', { width: (widths[index] ?? 40) - 2 * pad }),
        ),
      ) +
      2 * pad
    );
  }

  private row(
    structure: PDFKit.PDFStructureElement,
    cells: readonly string[],
    columns: readonly Column[],
    widths: readonly number[],
    points: number,
    tag: 'TH' | 'TD',
  ): void {
    const { document } = this;
    const isHead = tag === 'TH';
    const height = this.heightOf(cells, widths, points, isHead);
    const top = document.y;
    const line = document.struct('TR');
    structure.add(line);
    cells.forEach((cell, index) => {
      const left = this.left + widths.slice(0, index).reduce((sum, width) => sum + width, 0);
      const element = document.struct(isHead || index === 0 ? 'TH' : 'TD', {}, () =>
        this.cell(cell, columns[index]!, left, top, widths[index]!, points, isHead),
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
  private repeatHead(table: Table, widths: readonly number[], points: number): void {
    const { document } = this;
    const cells = table.columns.map(({ head }) => head);
    const height = this.heightOf(cells, widths, points, true);
    const top = document.y;
    document.markContent('Artifact', { type: 'Layout' });
    cells.forEach((cell, index) => {
      const left = this.left + widths.slice(0, index).reduce((sum, width) => sum + width, 0);
      this.cell(cell, table.columns[index]!, left, top, widths[index]!, points, true);
    });
    document.endMarkedContent();
    this.rule(top + height, 0.9);
    document.y = top + height;
  }

  private cell(text: string, column: Column, left: number, top: number, width: number, points: number, isHead: boolean): void {
    this.document
      .font(isHead ? 'bold' : 'regular')
      .fontSize(points)
      .fillColor('#1f2328')
      .text(breakable(text) || ' ', left + pad, top + pad, { width: width - 2 * pad, align: column.align });
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
}

/** Text as drawn; long words get places to break at. */
function breakable(text: string): string {
  return visible(text);
}
