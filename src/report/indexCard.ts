import type { Series } from '../series/series.js';
import { forecastWord } from './forecastWord.js';
import { formatElapsed, formatPercent, formatTarget, formatTime } from './formatNumber.js';

/** One run on the page of all runs. */
export interface IndexCard {
  readonly run: string;
  /** Address of the report, relative to the page. */
  readonly href: string;
  readonly title: string;
  readonly word: string;
  readonly detail: string;
  readonly tone: 'run' | 'good' | 'look' | 'plain';
  readonly conversion: string;
  readonly lastPoint: string;
  readonly points: string;
  readonly flags: string;
  /** Usable points: seconds and conversion. */
  readonly curve: readonly (readonly [elapsedS: number, value: number])[];
  readonly target?: number;
  readonly isLive: boolean;
}

/**
 * What the page of all runs says of one run.
 *
 * @param names folder names from the output folder down, as bytes: they need not be UTF-8
 * @param target conversion that counts as done
 */
export function indexCard(
  series: Series,
  names: readonly Buffer[],
  batch: string | undefined,
  target: number | undefined,
): IndexCard {
  const usable = series.points.filter(({ status, amounts }) => status !== 'set-aside' && amounts !== undefined);
  const last = series.points.at(-1);
  const conversion = usable.findLast(({ amounts }) => amounts?.conversion)?.amounts?.conversion;
  const flagged = series.points.filter(({ status }) => status === 'flagged').length;
  const aside = series.points.length - series.points.filter(({ status }) => status !== 'set-aside').length;
  const notUsed = series.inputs.length;
  const state = stateOf(series, target);
  const remarks = [
    flagged > 0 ? `${flagged} flagged` : '',
    aside > 0 ? `${aside} set aside` : '',
    notUsed > 0 ? `${notUsed} further ${notUsed === 1 ? 'file' : 'files'} not used` : '',
  ].filter((part) => part !== '');
  return {
    run: batch !== undefined && batch !== series.run ? `${batch} (${series.run})` : series.run,
    href: `${names.map(encodeName).join('/')}/report.html`,
    title: series.method.title,
    ...state,
    conversion: conversion ? formatPercent(conversion.value, conversion.u) : 'not determined',
    lastPoint: last ? `${formatTime(last.acquired)}, ${formatElapsed(last.elapsedS)} after the start` : 'none yet',
    points: `${usable.length} used`,
    flags: remarks.join(', '),
    curve: usable.flatMap(({ elapsedS, amounts }) =>
      amounts?.conversion ? [[elapsedS, amounts.conversion.value] as const] : [],
    ),
    ...(target !== undefined ? { target } : {}),
  };
}

/** @source RFC 3986, 2.3: unreserved characters stand for themselves, every other byte is percent-encoded */
function encodeName(name: Buffer): string {
  return [...name]
    .map((byte) => {
      const character = String.fromCharCode(byte);
      return /[A-Za-z0-9._~-]/.test(character) ? character : `%${byte.toString(16).toUpperCase().padStart(2, '0')}`;
    })
    .join('');
}

const looks = ['limit-broken', 'balance-lost', 'stalled', 'silent', 'trouble', 'new-signal'] as const;

function stateOf(series: Series, target: number | undefined): Pick<IndexCard, 'word' | 'detail' | 'tone' | 'isLive'> {
  const { states, forecast, points } = series;
  const of = (name: string) => states.find(({ state }) => state === name);
  const isLive = of('final') === undefined && of('target-reached') === undefined;
  const look = looks.map(of).find((state) => state !== undefined);
  if (look) return { word: 'Needs a look:', detail: `${look.state.replace('-', ' ')}; ${look.evidence}`, tone: 'look', isLive };
  const done = of('final') ?? of('target-reached');
  if (done) return { word: 'Done:', detail: done.evidence, tone: 'good', isLive };
  if (points.length === 0) return { word: 'Waiting', detail: 'for the first time point', tone: 'plain', isLive };
  const first = points[0]!;
  if (forecast?.elapsedS !== undefined && forecast.lowS !== undefined && forecast.highS !== undefined && target !== undefined) {
    const zero = Date.parse(first.acquired) - 1000 * first.elapsedS;
    const at = (seconds: number) => new Date(zero + 1000 * seconds).toISOString().slice(11, 16);
    const detail = `${formatTarget(target)} ${forecastWord(series)} at ${at(forecast.elapsedS)} UTC (${at(forecast.lowS)} to ${at(forecast.highS)})`;
    return { word: 'Running:', detail, tone: 'run', isLive };
  }
  return { word: 'Running', detail: forecast && target !== undefined ? `; ${forecast.words}` : '', tone: 'run', isLive };
}
