declare module 'svg-to-pdfkit' {
  export default function SVGtoPDF(
    document: PDFKit.PDFDocument,
    svg: string,
    x: number,
    y: number,
    options?: { width?: number; height?: number; assumePt?: boolean; fontCallback?: () => string },
  ): void;
}
