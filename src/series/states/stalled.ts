import type { Method } from '../../method/method.js';
import type { RunState } from '../series.js';
import { beginningOf } from './beginningOf.js';
import { percent } from './targetReached.js';
import type { UsablePoint } from './usablePoints.js';

const leastPoints = 5;
/** Share of the points so far that the slope is taken over, so that a dense series is not judged by its last minutes. */
const windowShare = 0.2;
/** At the fastest rate that the slope allows, the rest of the way takes more than this many times the time spent so far. */
const patienceFactor = 3;
/** It moves again when it has come this share of the rest of the way. */
const movedShare = 0.05;
const startedConversion = 0.02;

/**
 * The slope of the last points cannot be told from zero, and even its upper bound would not bring the target within reach.
 *
 * @source slope and its u of a weighted straight line: JCGM 100:2008, H.3
 */
export function stalled(points: readonly UsablePoint[], method: Method): RunState | undefined {
  const target = method.conversion?.target;
  if (target === undefined) return undefined;
  const used = points.filter(({ amounts }) => amounts.conversion !== undefined);
  const windows = used.map((_, index) => windowAt(used, index));
  const isShort = (index: number) => {
    const { value, u } = used[index]!.amounts.conversion!;
    return value + 2 * u < target;
  };
  const begins = (index: number) => {
    const window = windows[index];
    if (!window || !isShort(index)) return false;
    const { value } = used[index]!.amounts.conversion!;
    // A reaction that has not begun may have an induction time: only a method that says how long to wait calls that a stall.
    const needed = method.kinetics.stalledAfterS;
    if (window.spanS < (needed ?? 0) || (value < startedConversion && needed === undefined)) return false;
    const fastest = window.slope + 2 * window.u;
    const reachS = patienceFactor * Math.max(window.spanS, used[index]!.elapsedS - used[0]!.elapsedS);
    return Math.abs(window.slope) <= 2 * window.u && fastest * reachS < target - value;
  };
  const ends = (index: number, since: number) => {
    if (!isShort(index)) return true;
    const [then, now] = [windows[since]!, windows[index]];
    const rise = now ? now.mean - then.mean : 0;
    const left = target - then.mean;
    return now !== undefined && rise > movedShare * left && rise > 3 * Math.hypot(now.meanU, then.meanU);
  };
  const since = beginningOf(used.length, begins, ends);
  if (since === undefined) return undefined;
  const { slope, spanS } = windows[since]!;
  const left = target - used[since]!.amounts.conversion!.value;
  const evidence = `conversion moved by ${percent(slope * spanS, 2)} % over ${(spanS / 60).toFixed(0)} min, not to be told from zero, with the target ${percent(left, 1)} % away`;
  return { state: 'stalled', since: used[since]!.sha256, evidence };
}

interface Window {
  readonly slope: number;
  readonly u: number;
  readonly spanS: number;
  readonly mean: number;
  readonly meanU: number;
}

function windowAt(points: readonly UsablePoint[], index: number): Window | undefined {
  const count = Math.max(leastPoints, Math.ceil(windowShare * (index + 1)));
  if (index + 1 < count) return undefined;
  const data = points.slice(index + 1 - count, index + 1).map(({ elapsedS, amounts: { conversion } }) => ({
    t: elapsedS,
    x: conversion!.value,
    w: Math.max(conversion!.u, 1e-6) ** -2,
  }));
  const s = data.reduce((sum, { w }) => sum + w, 0);
  const meanT = data.reduce((sum, { w, t }) => sum + w * t, 0) / s;
  const meanX = data.reduce((sum, { w, x }) => sum + w * x, 0) / s;
  const sxx = data.reduce((sum, { w, t }) => sum + w * (t - meanT) ** 2, 0);
  const spanS = data.at(-1)!.t - data[0]!.t;
  if (!(sxx > 0) || !(spanS > 0)) return undefined;
  const slope = data.reduce((sum, { w, t, x }) => sum + w * (t - meanT) * (x - meanX), 0) / sxx;
  // Scatter beyond the stated u widens the slope's own u.
  const misfit = data.reduce((sum, { w, t, x }) => sum + w * (x - meanX - slope * (t - meanT)) ** 2, 0) / (data.length - 2);
  const inflation = Math.max(1, misfit);
  return { slope, u: Math.sqrt(inflation / sxx), spanS, mean: meanX, meanU: Math.sqrt(inflation / s) };
}
