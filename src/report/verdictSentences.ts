import { judgeLimits } from '../amount/judgeLimits.js';
import { forecastWord } from './forecastWord.js';
import { formatElapsed, formatPercent, formatQuantity, formatTarget, formatU } from './formatNumber.js';
import type { ReportInput } from './reportInput.js';

/** The answer in words, as page 1 gives it: conversion, target, purity, limits, states, count of flags. */
export function verdictSentences({ series, method }: ReportInput): string[] {
  const last = series.points.findLast(({ status, amounts }) => status !== 'set-aside' && amounts !== undefined);
  const sentences: string[] = [];
  if (!last?.amounts) return ['No usable time point yet: nothing is stated.'];
  const { conversion } = last.amounts;
  if (conversion)
    sentences.push(
      `Conversion ${formatPercent(conversion.value, conversion.u)} at the last usable point, ${formatElapsed(last.elapsedS)} after the start (${last.file}).`,
    );
  else if (method.conversion)
    sentences.push(`Conversion not determined at the last usable point (${last.file}): a species it needs was not measured.`);
  else sentences.push('This method states no conversion; see the comments of the method for what is followed and why.');
  sentences.push(...targetSentences(series, method.conversion?.target));
  const { purity } = last.amounts;
  if (purity)
    sentences.push(
      `Mass fraction of ${method.purity?.of ?? 'the product'} ${formatQuantity(purity.result.value, purity.result.u)} g/g, expanded uncertainty ${formatU(purity.expandedU)} g/g (k = ${purity.coverageFactor.toFixed(2)}).`,
    );
  for (const { words } of judgeLimits(last.amounts, method)) sentences.push(`${words.charAt(0).toUpperCase()}${words.slice(1)}.`);
  const over = last.amounts.residualSolvents?.filter(({ verdict }) => verdict === 'above' || verdict === 'near') ?? [];
  for (const { name, verdict, limitPpm, ppm, u } of over)
    sentences.push(
      `${name} ${formatQuantity(ppm, u)} ppm is ${verdict === 'above' ? 'above' : 'near'} its limit of ${limitPpm} ppm.`,
    );
  const growing = series.unassignedLines?.filter(({ trend, areas }) => trend === 'grows' && isOften(areas)) ?? [];
  if (growing.length > 0)
    sentences.push(
      `Unassigned and growing: ${growing
        .map(({ words }) => words)
        .slice(0, 4)
        .join('; ')}.`,
    );
  const flagged = series.points.filter(({ status }) => status === 'flagged').length;
  const aside = series.points.filter(({ status }) => status === 'set-aside').length;
  sentences.push(
    `${series.points.length} time points: ${series.points.length - flagged - aside} accepted, ${flagged} flagged, ${aside} set aside; ${series.inputs.length} further ${series.inputs.length === 1 ? 'file' : 'files'} not used.`,
  );
  return sentences;
}

function targetSentences(series: ReportInput['series'], target: number | undefined): string[] {
  const { states, forecast, kinetics } = series;
  if (target === undefined) return [];
  const reached = states.find(({ state }) => state === 'target-reached');
  if (reached) return [`Target of ${formatTarget(target)} reached: ${reached.evidence}.`];
  const others = states
    .filter(({ state }) => state === 'stalled' || state === 'limit-broken')
    .map(({ state, evidence }) => `${state === 'stalled' ? 'Stalled' : 'Limit broken'}: ${evidence}.`);
  if (forecast?.elapsedS !== undefined && forecast.lowS !== undefined && forecast.highS !== undefined) {
    const interval = `95 % interval ${formatElapsed(forecast.lowS)} to ${formatElapsed(forecast.highS)}`;
    return [
      ...others,
      `Target of ${formatTarget(target)} ${forecastWord(series)} ${formatElapsed(forecast.elapsedS)} after the start (${interval}; ${forecast.words}).`,
    ];
  }
  return [
    ...others,
    `Target of ${formatTarget(target)} not reached; forecast ${forecast?.words ?? 'not made'}${kinetics ? ` (${kinetics.words})` : ''}.`,
  ];
}

/** Page 1 names a growing line only when it was seen in a good part of the points; all of them stand in the section on amounts. */
function isOften(areas: readonly (number | null)[]): boolean {
  return areas.filter((area) => area !== null).length >= Math.max(3, 0.4 * areas.length);
}
