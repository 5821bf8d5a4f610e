import type { Quantity } from '../base/quantity.js';
import type { Method } from '../method/method.js';
import { type CurveFit, fitCurve } from './fitCurve.js';
import { laws } from './laws/index.js';
import type { Law } from './laws/law.js';
import { runTest } from './runTest.js';
import type { Kinetics, LawFit, SeriesPoint } from './series.js';

/** Conversions are not trusted to better than this in a rate law: mixing, temperature and timing see to it. */
const uFloor = 5e-4;
const decidedWeight = 0.9;

/** Points with a conversion, ready to be fitted. */
export interface ConversionData {
  readonly t: readonly number[];
  readonly x: readonly number[];
  readonly u: readonly number[];
}

/** A law with its fit, for the forecast. */
export interface FittedLaw {
  readonly law: Law;
  readonly fit: CurveFit;
  /** sqrt(chi-square / degrees of freedom), at least 1. */
  readonly inflation: number;
  readonly weight: number;
}

/**
 * Fits the rate laws to the conversion and weighs them.
 *
 * @param points by time; set-aside ones carry nothing, outlying ones are weighted down, none is dropped in silence
 * @returns undefined without a conversion or with fewer than four points; `model` only when the data decide
 * @source AICc: Hurvich, Tsai, Biometrika 1989, 76, 297; weights: Burnham, Anderson 2002
 */
export function fitKinetics(points: readonly SeriesPoint[], method: Method): Kinetics | undefined {
  const data = conversionData(points);
  if (data.t.length < 4) return undefined;
  const fitted = fitLaws(data, method.kinetics.models);
  if (fitted.length === 0) return { weights: {}, fits: [], words: 'no rate law fits: none of those tried reaches the data' };
  const best = fitted[0]!;
  const weights = Object.fromEntries(fitted.map(({ law, weight }) => [law.name, weight]));
  const fits = fitted.map((entry) => toLawFit(entry, data));
  const isDecided = best.weight >= decidedWeight;
  const misfit = rmsOf(best.fit.residuals);
  const isFitting = best.inflation < 8 || misfit < 0.01;
  const words = !isFitting
    ? `no law fits: the best, ${best.law.words}, leaves ${(100 * misfit).toFixed(1)} % rms in conversion`
    : isDecided
      ? `${best.law.words} describes the conversion (weight ${best.weight.toFixed(2)})`
      : undecidedWords(fitted, data);
  const model = isDecided && isFitting ? { model: best.law.name, parameters: parametersOf(best) } : {};
  return { ...model, weights, fits, words, curve: curveOf(best, data, points) };
}

export function conversionData(points: readonly SeriesPoint[]): ConversionData {
  const used = points.filter(({ status, amounts }) => status !== 'set-aside' && amounts?.conversion !== undefined);
  return {
    t: used.map(({ elapsedS }) => elapsedS),
    x: used.map(({ amounts }) => amounts!.conversion!.value),
    u: used.map(
      ({ amounts, flags }) =>
        Math.hypot(amounts!.conversion!.u, uFloor) * (flags.some(({ code }) => code === 'outlying') ? 20 : 1),
    ),
  };
}

/** Fits every law that has fewer parameters than there are points, best first, with Akaike weights. */
export function fitLaws({ t, x, u }: ConversionData, names: readonly string[] | undefined): FittedLaw[] {
  const weights = u.map((value) => value ** -2);
  const tried = laws.filter(({ name, parameters }) => (!names || names.includes(name)) && parameters.length + 1 < t.length);
  const fits = tried.flatMap((law) => {
    const starts = law.start(t, x).map((start) => fitCurve((p, at) => law.value(p, at), t, x, weights, start));
    const sensible = starts.filter(({ parameters, chiSquare }) => Number.isFinite(chiSquare) && law.isSensible(parameters));
    const fit = sensible.sort((a, b) => a.chiSquare - b.chiSquare)[0];
    return fit ? [{ law, fit }] : [];
  });
  if (fits.length === 0) return [];
  // Uncertainties may be too small for the real world; the best law sets the scale of what is left over.
  const scale = Math.max(
    1,
    Math.min(...fits.map(({ fit, law }) => fit.chiSquare / Math.max(1, t.length - law.parameters.length))),
  );
  const scored = fits.map(({ law, fit }) => ({ law, fit, aicc: aiccOf(fit.chiSquare / scale, law.parameters.length, t.length) }));
  const least = Math.min(...scored.map(({ aicc }) => aicc));
  const total = scored.reduce((sum, { aicc }) => sum + Math.exp(-(aicc - least) / 2), 0);
  return scored
    .map(({ law, fit, aicc }) => {
      const freedom = Math.max(1, t.length - law.parameters.length);
      return {
        law,
        fit,
        inflation: Math.max(1, Math.sqrt(fit.chiSquare / freedom)),
        weight: Math.exp(-(aicc - least) / 2) / total,
      };
    })
    .sort((a, b) => b.weight - a.weight || (a.law.name < b.law.name ? -1 : 1));
}

function aiccOf(chiSquare: number, p: number, n: number): number {
  return chiSquare + 2 * p + (n - p - 1 > 0 ? (2 * p * (p + 1)) / (n - p - 1) : 1e3);
}

function parametersOf({ law, fit, inflation }: FittedLaw): Record<string, Quantity> {
  return Object.fromEntries(
    law.parameters.map((name, index) => [
      name,
      { value: fit.parameters[index]!, u: inflation * Math.sqrt(Math.max(0, fit.covariance[index]![index]!)) },
    ]),
  );
}

function toLawFit(entry: FittedLaw, data: ConversionData): LawFit {
  const { law, fit, weight } = entry;
  const sd = fit.covariance.map((row, index) => Math.sqrt(Math.max(row[index]!, 1e-300)));
  return {
    model: law.name,
    parameters: finiteOnly(parametersOf(entry)),
    correlation: fit.covariance.map((row, a) => row.map((value, b) => clampUnit(value / (sd[a]! * sd[b]!)))),
    aicc: aiccOf(fit.chiSquare, law.parameters.length, data.t.length),
    weight,
    residuals: fit.residuals,
    runTestP: runTest(fit.residuals),
  };
}

function finiteOnly(parameters: Record<string, Quantity>): Record<string, Quantity> {
  return Object.fromEntries(
    Object.entries(parameters).filter(([, { value, u }]) => Number.isFinite(value) && Number.isFinite(u)),
  );
}

const clampUnit = (value: number) => (Number.isFinite(value) ? Math.max(-1, Math.min(1, value)) : 0);
const rmsOf = (values: readonly number[]) =>
  Math.sqrt(values.reduce((sum, value) => sum + value * value, 0) / Math.max(1, values.length));

function undecidedWords(fitted: readonly FittedLaw[], { x }: ConversionData): string {
  const near = fitted.filter(({ weight }) => weight > 0.05).slice(0, 3);
  const names = near.map(({ law }) => law.words);
  const list = names.length > 1 ? `${names.slice(0, -1).join(', ')} and ${names.at(-1)}` : names.join('');
  return `the data do not decide: ${list} fit about equally well up to ${(100 * Math.max(...x)).toFixed(0)} % conversion`;
}

const curveCount = 81;

function curveOf(entry: FittedLaw, { t }: ConversionData, points: readonly SeriesPoint[]): NonNullable<Kinetics['curve']> {
  const end = 1.15 * Math.max(...points.map(({ elapsedS }) => elapsedS), ...t, 1);
  const elapsedS = Array.from({ length: curveCount }, (_, index) => (end * index) / (curveCount - 1));
  const value = elapsedS.map((at) => entry.law.value(entry.fit.parameters, at));
  const half = elapsedS.map((at) => 2 * sdAt(entry, at));
  return { elapsedS, value, low: value.map((y, index) => y - half[index]!), high: value.map((y, index) => y + half[index]!) };
}

/** Standard uncertainty of the fitted conversion at a time, by the law of propagation. */
export function sdAt({ law, fit, inflation }: FittedLaw, at: number): number {
  const gradient = fit.parameters.map((value, index) => {
    const step = 1e-5 * Math.max(Math.abs(value), 1e-9);
    const shifted = (sign: number) =>
      law.value(
        fit.parameters.map((p, k) => (k === index ? p + sign * step : p)),
        at,
      );
    return (shifted(1) - shifted(-1)) / (2 * step);
  });
  let variance = 0;
  for (let i = 0; i < gradient.length; i += 1) {
    for (let j = 0; j < gradient.length; j += 1) variance += gradient[i]! * gradient[j]! * fit.covariance[i]![j]!;
  }
  return inflation * Math.sqrt(Math.max(0, Number.isFinite(variance) ? variance : 0));
}
