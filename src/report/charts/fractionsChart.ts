import { line } from 'd3-shape';
import type { Method } from '../../method/method.js';
import type { Series } from '../../series/series.js';
import { formatElapsed, formatQuantity } from '../formatNumber.js';
import { label, makeFrame, marker, wrapSvg } from './frame.js';
import { ink, seriesStyles } from './palette.js';

/** Mole fractions of every species that has one, against time, each labelled at its end. */
export function fractionsChart(
  series: Series,
  method: Method,
): { svg: string; widthPx: number; heightPx: number; description: string } | undefined {
  const [widthPx, heightPx] = [760, 280];
  const points = series.points.filter(({ amounts, status }) => status !== 'set-aside' && amounts);
  const shown = method.species.filter(({ id }) => points.some(({ amounts }) => amounts!.species[id]?.moleFraction !== undefined));
  if (shown.length === 0 || points.length < 2) return undefined;
  const endS = Math.max(1, ...points.map(({ elapsedS }) => elapsedS));
  const startS = Math.min(0, ...points.map(({ elapsedS }) => elapsedS));
  const frame = makeFrame({
    widthPx,
    heightPx,
    x: { domain: [startS / 3600, endS / 3600], label: 'time since start / h' },
    y: { domain: [0, 1], label: 'mole fraction' },
    marginRightPx: 170,
  });
  const parts = [frame.svg];
  const ends: { y: number; text: string; color: string; marker: string }[] = [];
  shown.forEach(({ id, name }, index) => {
    const style = seriesStyles[index % seriesStyles.length]!;
    const data = points.flatMap(({ elapsedS, amounts }) => {
      const fraction = amounts!.species[id]?.moleFraction;
      return fraction === undefined
        ? []
        : [
            {
              x: frame.x(elapsedS / 3600),
              y: frame.y(Math.max(-0.05, Math.min(1.05, fraction))),
              tip: `${name}, ${formatElapsed(elapsedS)}: ${formatQuantity(fraction, amounts!.species[id]!.moleFractionU)}`,
            },
          ];
    });
    const path = line<{ x: number; y: number }>()
      .x(({ x }) => Math.round(x * 10) / 10)
      .y(({ y }) => Math.round(y * 10) / 10)(data);
    parts.push(
      `<path d="${path ?? ''}" fill="none" stroke="${style.color}" stroke-width="1.3"${style.dash ? ` stroke-dasharray="${style.dash}"` : ''}/>`,
      ...data.map(({ x, y, tip }) => marker(style.marker, x, y, style.color, false, data.length > 120 ? 1.8 : 2.6, tip)),
    );
    ends.push({ y: data.at(-1)?.y ?? 0, text: name, color: style.color, marker: style.marker });
  });
  for (const { y, text, color, marker: kind } of spread(ends))
    parts.push(
      marker(kind, frame.plot.right + 12, y, color, false, 3),
      label(frame.plot.right + 20, y + 4, text.length > 22 ? `${text.slice(0, 21)}...` : text, 'start', ink.text),
    );
  const description = `Mole fractions of ${shown.map(({ name }) => name).join(', ')} over ${points.length} points; the numbers stand in the table of time points and in series.csv.`;
  return {
    svg: wrapSvg('fractions', widthPx, heightPx, 'Mole fractions against time', description, parts),
    widthPx,
    heightPx,
    description,
  };
}

/** Moves labels apart so that none covers another. */
function spread<T extends { y: number }>(labels: readonly T[]): T[] {
  const sorted = [...labels].sort((a, b) => a.y - b.y).map((entry) => ({ ...entry }));
  for (let k = 1; k < sorted.length; k += 1) if (sorted[k]!.y - sorted[k - 1]!.y < 14) sorted[k]!.y = sorted[k - 1]!.y + 14;
  return sorted;
}
