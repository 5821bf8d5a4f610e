import { createRequire } from 'node:module';

const require = createRequire(import.meta.url);
const at = (name: string) => require.resolve(`dejavu-fonts-ttf/ttf/${name}.ttf`);

/**
 * The one typeface family of the paper report, free to embed (DejaVu, Bitstream Vera licence). The paths serve as font names: a
 * second name for a font that is open already would make pdfkit open it again at every use.
 */
export const pdfFonts = { regular: at('DejaVuSans'), bold: at('DejaVuSans-Bold'), mono: at('DejaVuSansMono') } as const;
