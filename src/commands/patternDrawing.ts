import { lorentzSum } from '../pattern/lorentzSum.js';
import type { Line } from '../pattern/pattern.js';

const width = 360;
const height = 130;
const floor = 108;
const pointCount = 360;

/**
 * Draws one pattern as SVG: the curve at the given line width, its lines as sticks, an axis in Hz.
 *
 * @param lines    Hz from the centre, shares summing to 1; at least one
 * @param widthHz  full width at half height, Hz
 * @param label    accessible name, already escaped for HTML
 * @returns one `svg` element; the same input gives the same bytes
 */
export function patternDrawing(lines: readonly Line[], widthHz: number, label: string): string {
  const strong = lines.filter((line) => line.share > 1e-3);
  const reach = Math.max(...strong.map((line) => Math.abs(line.offsetHz)), 3 * widthHz) + 4 * widthHz;
  const x = (offsetHz: number) => rounded(width / 2 - (offsetHz / reach) * (width / 2 - 8));
  const curve = Array.from({ length: pointCount }, (_, index) => {
    const offsetHz = reach - (2 * reach * index) / (pointCount - 1);
    return { offsetHz, value: lorentzSum(lines, widthHz, offsetHz) };
  });
  const tallest = Math.max(...curve.map(({ value }) => value));
  const y = (part: number) => rounded(floor - part * (floor - 10));
  const path = curve
    .map(({ offsetHz, value }, index) => `${index === 0 ? 'M' : 'L'}${x(offsetHz)} ${y(value / tallest)}`)
    .join('');
  const largest = Math.max(...strong.map((line) => line.share));
  const sticks = strong
    .map((line) => `<path class="stick" d="M${x(line.offsetHz)} ${floor}V${y((0.5 * line.share) / largest)}"/>`)
    .join('');
  const tick = tickHz(reach);
  const ticks = [-tick, 0, tick]
    .map((at) => `<path class="axis" d="M${x(at)} ${floor}v4"/><text x="${x(at)}" y="${floor + 16}">${at} Hz</text>`)
    .join('');
  const axis = `<path class="axis" d="M8 ${floor}H${width - 8}"/>`;
  return `<svg role="img" aria-label="${label}" viewBox="0 0 ${width} ${height}">${axis}${ticks}${sticks}<path class="curve" d="${path}"/></svg>`;
}

/** 1, 2 or 5 times a power of ten, at about two thirds of the reach. */
function tickHz(reach: number): number {
  const power = 10 ** Math.floor(Math.log10(reach * 0.7));
  const digit = [5, 2, 1].find((one) => one * power <= reach * 0.7) ?? 1;
  return Number((digit * power).toPrecision(3));
}

function rounded(value: number): number {
  return Math.round(value * 10) / 10;
}
