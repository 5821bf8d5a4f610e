import type { Budget } from '../../amount/amounts.js';
import { label, n, wrapSvg } from './frame.js';
import { ink, seriesStyles } from './palette.js';

/** A bar per contribution of an uncertainty budget, largest first. */
export function budgetChart({ lines, result }: Budget): { svg: string; widthPx: number; heightPx: number; description: string } {
  const shown = lines.filter(({ contribution }) => contribution > 0).sort((a, b) => b.contribution - a.contribution);
  const [widthPx, heightPx] = [760, 34 + 24 * shown.length];
  const most = Math.max(...shown.map(({ contribution }) => contribution), 1e-300);
  const parts = shown.flatMap(({ quantity, contribution }, index) => {
    const y = 10 + 24 * index;
    const width = (400 * contribution) / most;
    return [
      label(232, y + 14, quantity, 'end', ink.text),
      `<rect x="240" y="${y + 3}" width="${n(width)}" height="14" fill="${seriesStyles[0].color}"/>`,
      label(248 + width, y + 14, `${((100 * contribution ** 2) / result.u ** 2).toFixed(0)} % of the variance`, 'start'),
    ];
  });
  const description = shown
    .map(({ quantity, contribution }) => `${quantity}: ${((100 * contribution ** 2) / result.u ** 2).toFixed(0)} %`)
    .join('; ');
  return {
    svg: wrapSvg('budget', widthPx, heightPx, 'Contributions to the uncertainty of the purity', description, parts),
    widthPx,
    heightPx,
    description,
  };
}
