import { pdfText } from './pdfText.js';

type Document = PDFKit.PDFDocument;
type Attributes = Readonly<Record<string, string>>;

const element = /<(\/?)([a-z]+)((?:\s+[a-z0-9-]+="[^"]*")*)\s*(\/?)>([^<]*)/g;
const attribute = /([a-z0-9-]+)="([^"]*)"/g;

/**
 * Draws one of our own charts as vectors. It knows just what the charts are made of (line, rect, circle, polygon, path of M, L and
 * Z, text with one turn) and writes it straight through: a general SVG reader took most of the time of a report.
 *
 * @param svg made by `wrapSvg`
 * @param font registered font of every label
 */
export function drawSvg(
  document: Document,
  svg: string,
  box: { readonly left: number; readonly top: number; readonly scale: number },
  font: string,
): void {
  const { x, y } = document;
  document.save();
  document.translate(box.left, box.top).scale(box.scale);
  document.font(font);
  element.lastIndex = 0;
  for (let match = element.exec(svg); match !== null; match = element.exec(svg)) {
    const [, closing, name, attributes, , text] = match as unknown as string[];
    if (closing === '' && name !== undefined) drawElement(document, name, parse(attributes ?? ''), unescapeMarkup(text ?? ''));
  }
  document.restore();
  // Labels move the place where text goes on: give it back.
  document.x = x;
  document.y = y;
}

function parse(source: string): Attributes {
  return Object.fromEntries([...source.matchAll(attribute)].map(([, key, value]) => [key!, value!]));
}

function drawElement(document: Document, name: string, a: Attributes, text: string): void {
  const at = (key: string) => Number(a[key] ?? 0);
  if (name === 'text') {
    drawLabel(document, a, text);
    return;
  }
  if (name === 'rect') document.rect(at('x'), at('y'), at('width'), at('height'));
  else if (name === 'circle') document.circle(at('cx'), at('cy'), at('r'));
  else if (name === 'line') document.moveTo(at('x1'), at('y1')).lineTo(at('x2'), at('y2'));
  else if (name === 'polygon') tracePath(document, `M${(a.points ?? '').split(' ').join('L')}Z`);
  else if (name === 'path' && a.d) tracePath(document, a.d);
  else return;
  paint(document, a);
}

function tracePath(document: Document, d: string): void {
  for (const [, command, x, y] of d.matchAll(/([MLZ])\s*(?:(-?[\d.e-]+)[,\s](-?[\d.e-]+))?/g)) {
    if (command === 'M') document.moveTo(Number(x), Number(y));
    else if (command === 'L') document.lineTo(Number(x), Number(y));
    else document.closePath();
  }
}

/** Fill and stroke with their opacity, width and dash; each drawing leaves the state as it was. */
function paint(document: Document, a: Attributes): void {
  const fill = a.fill !== undefined && a.fill !== 'none' ? a.fill : undefined;
  const stroke = a.stroke !== undefined && a.stroke !== 'none' ? a.stroke : undefined;
  const isPlainLine = fill === undefined;
  if (stroke !== undefined) {
    document.lineWidth(Number(a['stroke-width'] ?? 1));
    document.strokeColor(stroke, Number(a['stroke-opacity'] ?? 1));
    if (a['stroke-dasharray']) {
      const pattern = a['stroke-dasharray'].split(' ').map(Number);
      document.dash(pattern[0]!, { space: pattern[1] ?? pattern[0]! });
    } else document.undash();
  }
  if (fill !== undefined) document.fillColor(fill, Number(a['fill-opacity'] ?? 1));
  if (isPlainLine) {
    if (stroke !== undefined) document.stroke();
    else (document as unknown as { addContent(text: string): void }).addContent('n');
  } else if (stroke !== undefined) document.fillAndStroke();
  else document.fill();
}

function drawLabel(document: Document, a: Attributes, source: string): void {
  const text = pdfText(document, source);
  if (text === '') return;
  const points = Number(a['font-size'] ?? 12);
  document.fontSize(points).fillColor(a.fill ?? '#000000', 1);
  const width = document.widthOfString(text);
  const shift = a['text-anchor'] === 'middle' ? width / 2 : a['text-anchor'] === 'end' ? width : 0;
  const turned = /^translate\(([\d.-]+) ([\d.-]+)\) rotate\(([\d.-]+)\)$/.exec(a.transform ?? '');
  document.save();
  if (turned) document.translate(Number(turned[1]), Number(turned[2])).rotate(Number(turned[3]));
  document.text(text, Number(a.x ?? 0) - shift, Number(a.y ?? 0), { lineBreak: false, baseline: 'alphabetic' });
  document.restore();
}

/** The way back from `escapeMarkup`. */
function unescapeMarkup(text: string): string {
  return text.replace(/&#(\d+);/g, (_, code: string) => String.fromCharCode(Number(code)));
}
