/** A rate law for the conversion as a function of time. */
export interface Law {
  /** As `series.json` names it. */
  readonly name: string;
  /** In words, for the report. */
  readonly words: string;
  /** Parameter names with their unit last. */
  readonly parameters: readonly string[];
  /** Conversion at time `t` (s). */
  value(p: readonly number[], t: number): number;
  /** Starting values from the data: shapes (n). */
  start(t: readonly number[], x: readonly number[]): number[][];
  /** Whether parameters make sense; a fit that ends outside is no fit. */
  isSensible(p: readonly number[]): boolean;
}

/** First guess of a first-order rate constant from the points that have moved. */
export function guessRate(t: readonly number[], x: readonly number[]): number {
  const rates = t.flatMap((time, index) => {
    const value = x[index]!;
    return time > 0 && value > 0.02 && value < 0.98 ? [-Math.log(1 - value) / time] : [];
  });
  rates.sort((a, b) => a - b);
  const span = Math.max(1, (t.at(-1) ?? 1) - (t[0] ?? 0));
  return rates[Math.floor(rates.length / 2)] ?? 1 / span;
}
