import { getDocument } from 'pdfjs-dist/legacy/build/pdf.mjs';

/** The words of every page in the order in which they are written, without any white space. */
export async function textOfPdf(bytes: Uint8Array): Promise<{ pages: string[]; metadata: string; tags: string[] }> {
  const document = await getDocument({ data: new Uint8Array(bytes), verbosity: 0, useSystemFonts: false }).promise;
  const pages: string[] = [];
  const tags = new Set<string>();
  for (let index = 1; index <= document.numPages; index += 1) {
    const page = await document.getPage(index);
    const content = await page.getTextContent();
    pages.push(squeeze(content.items.map((item) => ('str' in item ? item.str : '')).join('')));
    const collect = (node: { role?: string; children?: unknown[] } | null): void => {
      if (node?.role) tags.add(node.role);
      for (const child of node?.children ?? []) collect(child as never);
    };
    collect((await page.getStructTree()) as never);
  }
  const { metadata } = await document.getMetadata();
  return { pages, metadata: (metadata as unknown as { getRaw(): string } | null)?.getRaw() ?? '', tags: [...tags] };
}

export function squeeze(text: string): string {
  return text.replace(/\s+/g, '');
}
