import { type ScaleLinear, scaleLinear } from 'd3-scale';
import { escapeMarkup } from '../escapeMarkup.js';
import { fontFamily, ink } from './palette.js';

export interface FrameSettings {
  readonly widthPx: number;
  readonly heightPx: number;
  readonly x: {
    readonly domain: readonly [number, number];
    readonly label: string;
    readonly ticks?: number;
    readonly format?: (value: number) => string;
  };
  readonly y: {
    readonly domain: readonly [number, number];
    readonly label: string;
    readonly ticks?: number;
    readonly format?: (value: number) => string;
    readonly hidden?: boolean;
  };
  readonly marginRightPx?: number;
}

export interface Frame {
  readonly x: ScaleLinear<number, number>;
  readonly y: ScaleLinear<number, number>;
  /** Axes, grid and labels as SVG. */
  readonly svg: string;
  readonly plot: { readonly left: number; readonly top: number; readonly right: number; readonly bottom: number };
}

/** Axes with units, a light grid, labels beside their axis. */
export function makeFrame(settings: FrameSettings): Frame {
  const { widthPx, heightPx, x, y } = settings;
  const plot = { left: y.hidden ? 14 : 62, top: 14, right: widthPx - (settings.marginRightPx ?? 16), bottom: heightPx - 44 };
  const xScale = scaleLinear()
    .domain([...x.domain])
    .range([plot.left, plot.right]);
  const yScale = scaleLinear()
    .domain([...y.domain])
    .range([plot.bottom, plot.top]);
  const xTicks = xScale.ticks(x.ticks ?? 7);
  const yTicks = y.hidden ? [] : yScale.ticks(y.ticks ?? 5);
  const format = (value: number, given?: (value: number) => string) =>
    given ? given(value) : String(Number(value.toPrecision(10)));
  const parts = [
    ...yTicks.map(
      (tick) =>
        `<line x1="${plot.left}" x2="${plot.right}" y1="${n(yScale(tick))}" y2="${n(yScale(tick))}" stroke="${ink.grid}" stroke-width="0.8"/>`,
    ),
    `<line x1="${plot.left}" x2="${plot.right}" y1="${plot.bottom}" y2="${plot.bottom}" stroke="${ink.soft}" stroke-width="1"/>`,
    ...xTicks.map(
      (tick) =>
        `<line x1="${n(xScale(tick))}" x2="${n(xScale(tick))}" y1="${plot.bottom}" y2="${plot.bottom + 4}" stroke="${ink.soft}" stroke-width="1"/>`,
    ),
    ...xTicks.map((tick) => label(xScale(tick), plot.bottom + 17, format(tick, x.format), 'middle')),
    ...yTicks.map((tick) => label(plot.left - 7, yScale(tick) + 4, format(tick, y.format), 'end')),
    label((plot.left + plot.right) / 2, heightPx - 7, x.label, 'middle', ink.text),
    y.hidden
      ? ''
      : `<text transform="translate(15 ${(plot.top + plot.bottom) / 2}) rotate(-90)" text-anchor="middle" font-family="${fontFamily}" font-size="12" fill="${ink.text}">${escapeMarkup(y.label)}</text>`,
  ];
  return { x: xScale, y: yScale, svg: parts.join(''), plot };
}

/** A label; sizes are those of the page's small text. */
export function label(
  x: number,
  y: number,
  text: string,
  anchor: 'start' | 'middle' | 'end',
  color: string = ink.soft,
  size = 11.5,
): string {
  return `<text x="${n(x)}" y="${n(y)}" text-anchor="${anchor}" font-family="${fontFamily}" font-size="${size}" fill="${color}">${escapeMarkup(text)}</text>`;
}

/** Two decimals: a hundredth of a pixel is enough, and bytes stay few. */
export function n(value: number): string {
  return String(Math.round(value * 100) / 100);
}

/** Wraps the parts of a chart. Title and description are read out; the drawing itself is one picture. */
export function wrapSvg(
  id: string,
  widthPx: number,
  heightPx: number,
  title: string,
  description: string,
  parts: readonly string[],
): string {
  return `<svg xmlns="http://www.w3.org/2000/svg" viewBox="0 0 ${widthPx} ${heightPx}" width="${widthPx}" height="${heightPx}" role="img" aria-labelledby="${id}-t ${id}-d"><title id="${id}-t">${escapeMarkup(title)}</title><desc id="${id}-d">${escapeMarkup(description)}</desc><rect width="${widthPx}" height="${heightPx}" fill="#ffffff"/>${parts.join('')}</svg>`;
}

/** A marker of the given kind, filled or hollow. */
export function marker(kind: string, x: number, y: number, color: string, isHollow = false, size = 3.4, tip?: string): string {
  const drawn = markerShape(kind, x, y, color, isHollow, size);
  return tip === undefined ? drawn : `<g data-tip="${escapeMarkup(tip)}">${drawn}</g>`;
}

function markerShape(kind: string, x: number, y: number, color: string, isHollow: boolean, size: number): string {
  const look = isHollow
    ? `fill="#ffffff" stroke="${color}" stroke-width="1.4"`
    : `fill="${color}" stroke="${color}" stroke-width="1"`;
  const at = (dx: number, dy: number) => `${n(x + dx)},${n(y + dy)}`;
  switch (kind) {
    case 'square':
      return `<rect x="${n(x - size)}" y="${n(y - size)}" width="${2 * size}" height="${2 * size}" ${look}/>`;
    case 'triangle':
      return `<polygon points="${at(0, -size * 1.2)} ${at(size * 1.1, size)} ${at(-size * 1.1, size)}" ${look}/>`;
    case 'diamond':
      return `<polygon points="${at(0, -size * 1.3)} ${at(size * 1.1, 0)} ${at(0, size * 1.3)} ${at(-size * 1.1, 0)}" ${look}/>`;
    case 'cross':
      return `<path d="M${at(-size, -size)}L${at(size, size)}M${at(-size, size)}L${at(size, -size)}" stroke="${color}" stroke-width="1.6" fill="none"/>`;
    default:
      return `<circle cx="${n(x)}" cy="${n(y)}" r="${size}" ${look}/>`;
  }
}
