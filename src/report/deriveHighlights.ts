import { forecastWord } from './forecastWord.js';
import { formatElapsed, formatTarget, formatU, formatValue } from './formatNumber.js';
import type { ReportInput } from './reportInput.js';
import type { Highlight } from './reportModel.js';

/** The few answers that page 1 gives large: conversion, target, purity, points. */
export function deriveHighlights({ series, method }: ReportInput): Highlight[] {
  const last = series.points.findLast(({ status, amounts }) => status !== 'set-aside' && amounts !== undefined);
  const conversion = last?.amounts?.conversion;
  const purity = last?.amounts?.purity;
  const highlights: Highlight[] = [];
  if (method.conversion)
    highlights.push({
      label: 'Conversion',
      value: conversion ? `${formatValue(100 * conversion.value, 100 * conversion.u)} %` : 'not determined',
      detail:
        conversion && last ? `u ${formatU(100 * conversion.u)} %, at ${formatElapsed(last.elapsedS)}` : 'no usable time point',
      tone: 'plain',
    });
  const target = targetHighlight(series, method.conversion?.target);
  if (target) highlights.push(target);
  if (purity)
    highlights.push({
      label: 'Mass fraction',
      value: `${formatValue(100 * purity.result.value, 100 * purity.result.u)} %`,
      detail: `u ${formatU(100 * purity.result.u)} %`,
      tone: 'plain',
    });
  const flagged = series.points.filter(({ status }) => status === 'flagged').length;
  const aside = series.points.filter(({ status }) => status === 'set-aside').length;
  highlights.push({
    label: 'Time points',
    value: `${series.points.length - aside} of ${series.points.length} used`,
    detail: `${flagged} flagged, ${aside} set aside`,
    tone: flagged + aside > 0 ? 'look' : 'good',
  });
  return highlights;
}

function targetHighlight(series: ReportInput['series'], target: number | undefined): Highlight | undefined {
  const { states, forecast } = series;
  if (target === undefined) return undefined;
  const label = `Target ${formatTarget(target)}`;
  if (states.some(({ state }) => state === 'target-reached'))
    return { label, value: 'reached', detail: 'lower 95 % bound above the target', tone: 'good' };
  if (states.some(({ state }) => state === 'stalled'))
    return { label, value: 'stalled', detail: 'no change while the target is away', tone: 'look' };
  if (forecast?.elapsedS === undefined || forecast.lowS === undefined || forecast.highS === undefined)
    return { label, value: 'not reached', detail: 'no forecast is made', tone: 'plain' };
  return {
    label,
    value: `at ${formatElapsed(forecast.elapsedS)}`,
    detail: `${forecastWord(series).replace(/;$/, '')}; 95 %: ${formatElapsed(forecast.lowS)} to ${formatElapsed(forecast.highS)}`,
    tone: 'plain',
  };
}
