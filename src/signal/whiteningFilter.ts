/** A longer filter gains nothing: beyond this the correlation of any usual window has died out. */
const orderMax = 8;
/** Share of white noise added before solving, so that bands that zero filling left empty are not amplified without bound. */
/** Weaker correlation than this changes no uncertainty by a percent. */
const notable = 0.02;
const floorShare = 0.03;

/** A causal filter that makes correlated noise nearly white, and what correlation remains. */
export interface Whitening {
  /** shape (p + 1), entry 0 first: filtered(i) = sum filter(k) x y(i - k). Unit variance in is unit variance out. */
  readonly filter: Float64Array;
  /** Autocorrelation of the filtered noise, entry 0 is 1. */
  readonly remaining: Float64Array;
  /** Autocorrelation before the filter, as far as it is notable. */
  readonly original: Float64Array;
}

/**
 * Prediction-error filter of noise with a known autocorrelation (Levinson and Durbin), normalised to keep unit variance.
 *
 * Zero filling and windows correlate neighbouring points; a least-squares fit of whitened points is the efficient one.
 *
 * @param given shape (m), lags 0, 1, 2 ...; entry 0 is 1
 * @returns filter of at most 25 taps and the correlation left after it
 * @source  J. Durbin, Rev. Int. Stat. Inst. 1960, 28, 233 (from memory)
 */
export function whiteningFilter(given: Float64Array): Whitening {
  const correlation = tapered(given);
  const order = Math.min(orderMax, lastNotable(correlation));
  const taps = durbin(correlation, order);
  const span = correlation.length - 1 + order;
  const raw = new Float64Array(Math.max(1, span + 1));
  for (let lag = 0; lag < raw.length; lag += 1) raw[lag] = filteredAt(correlation, taps, lag);
  const scale = 1 / Math.sqrt(Math.max(raw[0]!, 1e-12));
  const remaining = raw.map((value) => value * scale * scale);
  const end = lastNotable(remaining);
  return {
    filter: taps.map((value) => value * scale),
    remaining: remaining.slice(0, end + 1),
    original: correlation.slice(0, lastNotable(correlation) + 1),
  };
}

/** Brings a correlation that ends before it died out down to zero. */
function tapered(correlation: Float64Array): Float64Array {
  const last = correlation.length - 1;
  if (last < 1 || Math.abs(correlation[last]!) < 0.03) return correlation;
  return correlation.map((value, lag) => value * (1 - lag / (last + 1)));
}

function lastNotable(correlation: Float64Array): number {
  let last = 0;
  for (let lag = 1; lag < correlation.length; lag += 1) if (Math.abs(correlation[lag]!) > notable) last = lag;
  return last;
}

function durbin(correlation: Float64Array, order: number): Float64Array {
  const at = (lag: number) => (lag === 0 ? 1 + floorShare : (correlation[lag] ?? 0));
  let taps = [1];
  let variance = at(0);
  for (let m = 1; m <= order; m += 1) {
    let sum = 0;
    for (let k = 0; k < m; k += 1) sum += taps[k]! * at(m - k);
    const reflection = -sum / variance;
    // A correlation that was cut off too early is no longer one of any noise: stop where that shows.
    if (Math.abs(reflection) >= 1) break;
    const next = [...taps, 0];
    for (let k = 1; k <= m; k += 1) next[k] = (taps[k] ?? 0) + reflection * taps[m - k]!;
    taps = next;
    variance *= 1 - reflection * reflection;
  }
  return Float64Array.from(taps);
}

function filteredAt(correlation: Float64Array, taps: Float64Array, lag: number): number {
  let sum = 0;
  for (let i = 0; i < taps.length; i += 1) {
    for (let j = 0; j < taps.length; j += 1) sum += taps[i]! * taps[j]! * (correlation[Math.abs(lag + i - j)] ?? 0);
  }
  return sum;
}
