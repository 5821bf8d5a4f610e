import { visible } from './escapeMarkup.js';

const plain = /^[\n\x20-\x7e\u00a0-\u017f\u2010-\u2027\u2030\u2212]*$/;

/**
 * Text as it stands on paper: what is not visible, and what the current font has no glyph for, is written out as `\u{1f600}`. A
 * missing glyph would draw an empty box, which says nothing and which PDF/A forbids.
 *
 * @source ISO 19005-3, 6.2.11.8
 */
export function pdfText(document: PDFKit.PDFDocument, source: string): string {
  const text = visible(source).replaceAll('\t', '  ').replaceAll('\r', '');
  if (plain.test(text)) return text;
  const { font } = (document as unknown as { _font: { font: { hasGlyphForCodePoint(code: number): boolean } } })._font;
  return [...text]
    .map((character) => {
      const code = character.codePointAt(0)!;
      return code === 10 || font.hasGlyphForCodePoint(code) ? character : `\\u{${code.toString(16)}}`;
    })
    .join('');
}

/** The caption under a figure, and its alternative text. */
export function captionOf({ title, description }: { readonly title: string; readonly description: string }): string {
  return `${title}. ${description}`;
}
