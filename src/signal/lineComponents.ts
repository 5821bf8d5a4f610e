import type { TermLine } from './regionModel.js';

/**
 * One part of the shape that all lines of a spectrum share. Field inhomogeneity spreads every line over the same few hertz:
 * a sum of Lorentzians, each shifted a little and each as wide as the line itself or wider.
 */
export interface LineComponent {
  readonly offsetHz: number;
  readonly extraWidthHz: number;
  readonly share: number;
}

export const singleComponent: readonly LineComponent[] = [{ offsetHz: 0, extraWidthHz: 0, share: 1 }];

/**
 * Draws every line of a pattern with the components of the shared shape.
 *
 * @param components shares summing to 1; the first one is the main one
 * @returns shape (lines x components)
 * @source  convolution of Lorentzians: offsets add, widths add (textbook)
 */
export function withComponents(lines: readonly TermLine[], components: readonly LineComponent[]): readonly TermLine[] {
  if (components.length === 1) return lines;
  return lines.flatMap((line) =>
    components.map(({ offsetHz, extraWidthHz, share }, component) => ({
      ...line,
      offsetHz: line.offsetHz + offsetHz,
      share: line.share * share,
      extraWidthHz,
      component,
      componentShare: share,
    })),
  );
}
