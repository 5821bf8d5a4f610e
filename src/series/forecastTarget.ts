import type { Method } from '../method/method.js';
import { conversionData, type FittedLaw, fitLaws, sdAt } from './fitKinetics.js';
import { normalBelow } from './runTest.js';
import type { Forecast, Kinetics, SeriesPoint } from './series.js';

const confidence = 0.95;
const earliestConversion = 0.2;
const horizonFactor = 50;

/**
 * Forecasts when the target will be reached, with an interval that carries the uncertainty of parameters and of the law: the laws'
 * own distributions of the time, mixed by their weights.
 *
 * @returns undefined without a target; without `elapsedS` when the forecast is withheld, with the reason in words
 * @source delta method on the time at which a law crosses the target; mixture of log-normals by Akaike weight
 */
export function forecastTarget(
  points: readonly SeriesPoint[],
  method: Method,
  kinetics: Kinetics | undefined,
): Forecast | undefined {
  const target = method.conversion?.target;
  if (target === undefined) return undefined;
  const withheld = (words: string): Forecast => ({ target, confidence, words });
  const data = conversionData(points);
  if (!kinetics || data.t.length < 4) return withheld('withheld: fewer than four usable points');
  const most = Math.max(...data.x);
  if (most < earliestConversion) return withheld(`withheld: conversion has only reached ${(100 * most).toFixed(0)} %`);
  const fitted = fitLaws(data, method.kinetics.models).filter(({ weight }) => weight > 0.01);
  const last = Math.max(...data.t);
  const crossings = fitted.flatMap((entry) => {
    const time = crossingOf(entry, target, last);
    return time === undefined ? [] : [{ ...time, weight: entry.weight }];
  });
  const reaching = crossings.reduce((sum, { weight }) => sum + weight, 0);
  const all = fitted.reduce((sum, { weight }) => sum + weight, 0);
  if (crossings.length === 0 || reaching < 0.5 * all) return withheld('withheld: the laws that fit best do not reach the target');
  const quantile = (p: number) => mixtureQuantile(crossings, p * reaching);
  const [low, middle, high] = [quantile((1 - confidence) / 2), quantile(0.5), quantile((1 + confidence) / 2)];
  if (!(high < horizonFactor * Math.max(last, 1)) || high > 12 * middle)
    return withheld('withheld: the interval is too wide to act on');
  return {
    target,
    elapsedS: middle,
    lowS: low,
    highS: high,
    confidence,
    words: high - low > 0.8 * middle ? 'wide: the data leave the law or its rate open' : 'from the fitted laws, by weight',
  };
}

interface Crossing {
  readonly elapsedS: number;
  /** Standard uncertainty of ln(time). */
  readonly logU: number;
  readonly weight: number;
}

function crossingOf(entry: FittedLaw, target: number, last: number): Omit<Crossing, 'weight'> | undefined {
  const at = (t: number) => entry.law.value(entry.fit.parameters, t) - target;
  let high = Math.max(last, 1);
  while (at(high) < 0 && high < horizonFactor * last) high *= 1.5;
  if (at(high) < 0) return undefined;
  let low = 0;
  for (let turn = 0; turn < 80; turn += 1) {
    const middle = (low + high) / 2;
    if (at(middle) < 0) low = middle;
    else high = middle;
  }
  const slope = (at(high * 1.001) - at(high * 0.999)) / (0.002 * high);
  if (!(slope > 0)) return undefined;
  const u = sdAt(entry, high) / slope;
  return { elapsedS: high, logU: Math.min(3, Math.max(1e-4, u / high)) };
}

function mixtureQuantile(crossings: readonly Crossing[], p: number): number {
  const below = (logTime: number) =>
    crossings.reduce((sum, { elapsedS, logU, weight }) => sum + weight * normalBelow((logTime - Math.log(elapsedS)) / logU), 0);
  let low = Math.min(...crossings.map(({ elapsedS, logU }) => Math.log(elapsedS) - 8 * logU));
  let high = Math.max(...crossings.map(({ elapsedS, logU }) => Math.log(elapsedS) + 8 * logU));
  for (let turn = 0; turn < 80; turn += 1) {
    const middle = (low + high) / 2;
    if (below(middle) < p) low = middle;
    else high = middle;
  }
  return Math.exp((low + high) / 2);
}
