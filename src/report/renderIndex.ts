import { line } from 'd3-shape';
import { programVersion } from '../base/version.js';
import { n } from './charts/frame.js';
import { escapeMarkup } from './escapeMarkup.js';
import { fillTemplate, type Markup } from './fillTemplate.js';
import { formatTime } from './formatNumber.js';
import type { IndexCard } from './indexCard.js';
import { pageOf } from './renderHtml.js';
import { shippedTemplates, type TemplateSet } from './templateSet.js';

const refreshS = 60;
const order = { look: 0, run: 1, good: 2, plain: 3 } as const;

/**
 * The page of all runs: those that need a look first. It loads itself again while a run is live: by script, which a
 * reader can stop (WCAG 2.2, 2.2.1), or where scripts are off by itself.
 *
 * @param createdUtc time of the newest data entry of any record; never the clock
 */
export function renderIndex(
  cards: readonly IndexCard[],
  createdUtc: string | undefined,
  templates: TemplateSet = shippedTemplates(),
): string {
  const isLive = cards.some((card) => card.isLive);
  const sorted = [...cards].sort((a, b) => order[a.tone] - order[b.tone] || (a.run < b.run ? -1 : a.run > b.run ? 1 : 0));
  const looks = cards.filter(({ tone }) => tone === 'look').length;
  const body = fillTemplate(templates.indexPage, {
    program: programVersion,
    created: createdUtc !== undefined ? formatTime(createdUtc) : 'none',
    count: `${cards.length} ${cards.length === 1 ? 'run' : 'runs'}${looks > 0 ? `, ${looks} ${looks === 1 ? 'needs' : 'need'} a look` : ''}`,
    live: isLive,
    refresh: String(refreshS),
    cards: sorted.map((card) => ({
      run: card.run,
      href: card.href,
      title: card.title,
      word: card.word,
      detail: card.detail,
      tone: card.tone,
      conversion: card.conversion,
      lastPoint: card.lastPoint,
      points: card.points,
      flags: card.flags,
      sparkline: sparkline(card),
    })),
  });
  return pageOf({
    title: `${looks > 0 ? `(${looks}) ` : ''}kinetrail: runs`,
    body,
    style: templates.indexStyle,
    ...(isLive ? { refreshS, script: templates.indexScript } : {}),
  });
}

/** Conversion against time without axes; the words beside it give the numbers. */
function sparkline({ curve, target, run, conversion }: IndexCard): Markup {
  if (curve.length < 2) return { markup: '' };
  const [width, height] = [280, 56];
  const times = curve.map(([elapsedS]) => elapsedS);
  const [first, last] = [Math.min(...times), Math.max(...times)];
  const x = (elapsedS: number) => 4 + ((width - 8) * (elapsedS - first)) / Math.max(1, last - first);
  const y = (value: number) => height - 4 - (height - 8) * Math.max(0, Math.min(1, value));
  const step = Math.ceil(curve.length / 150);
  const kept = curve.filter((_, index) => index % step === 0 || index === curve.length - 1);
  const path = line<(typeof curve)[number]>()
    .x(([elapsedS]) => Math.round(x(elapsedS) * 10) / 10)
    .y(([, value]) => Math.round(y(value) * 10) / 10)([...kept]);
  const end = curve.at(-1)!;
  const aim =
    target !== undefined
      ? `<line class="aim" x1="4" x2="${width - 4}" y1="${n(y(target))}" y2="${n(y(target))}" stroke-width="1" stroke-dasharray="5 3"/>`
      : '';
  return {
    markup: `<svg viewBox="0 0 ${width} ${height}" role="img" aria-label="${escapeMarkup(`Conversion of ${run} through time, now ${conversion}`)}"><line class="base" x1="4" x2="${width - 4}" y1="${height - 4}" y2="${height - 4}"/>${aim}<path class="curve" d="${path ?? ''}" fill="none" stroke-width="2"/><circle class="dot" cx="${n(x(end[0]))}" cy="${n(y(end[1]))}" r="3.2"/></svg>`,
  };
}
