import { guessRate, type Law } from './law.js';

/**
 * The laws that are tried, as conversions with A0 = 1. `x0` is the conversion at time zero (mixing and the first minutes).
 *
 * @source integrated rate laws in their textbook form; see the shared table of methods, section 7
 */
export const laws: readonly Law[] = [
  {
    name: 'zero-order',
    words: 'zero order',
    parameters: ['k_per_s', 'x0'],
    value: ([k = 0, x0 = 0], t) => Math.min(1, x0 + k * t),
    start: (t, x) => [[guessRate(t, x), 0]],
    isSensible: ([k = 0, x0 = 0]) => k > 0 && Math.abs(x0) < 0.9,
  },
  {
    name: 'first-order',
    words: 'first order',
    parameters: ['k_per_s', 'x0'],
    value: ([k = 0, x0 = 0], t) => 1 - (1 - x0) * Math.exp(-k * t),
    start: (t, x) => [
      [guessRate(t, x), 0],
      [2 * guessRate(t, x), 0.05],
    ],
    isSensible: ([k = 0, x0 = 0]) => k > 0 && Math.abs(x0) < 0.9,
  },
  {
    name: 'second-order',
    words: 'second order, equal start',
    parameters: ['k_a0_per_s', 'x0'],
    value: ([k = 0, x0 = 0], t) => 1 - 1 / (1 / (1 - x0) + k * t),
    start: (t, x) => [[1.5 * guessRate(t, x), 0]],
    isSensible: ([k = 0, x0 = 0]) => k > 0 && x0 < 0.9 && x0 > -0.9,
  },
  {
    name: 'second-order-unequal',
    words: 'second order, unequal start',
    parameters: ['k_a0_per_s', 'x0', 'excess'],
    value: ([k = 0, x0 = 0, excess = 1], t) => {
      const r = 1 + excess;
      const growth = ((r - x0) / (1 - x0)) * Math.exp(Math.min(500, k * excess * t));
      return (growth - r) / (growth - 1);
    },
    start: (t, x) => [
      [guessRate(t, x), 0, 0.5],
      [guessRate(t, x) / 2, 0, 2],
    ],
    isSensible: ([k = 0, x0 = 0, excess = 0]) => k > 0 && Math.abs(x0) < 0.9 && excess > 0.01 && excess < 50,
  },
  {
    name: 'reversible',
    words: 'reversible first order',
    parameters: ['k_per_s', 'x0', 'x_end'],
    value: ([k = 0, x0 = 0, end = 1], t) => end - (end - x0) * Math.exp(-k * t),
    start: (t, x) => [[1.5 * guessRate(t, x), 0, Math.min(1, 1.05 * Math.max(...x))]],
    isSensible: ([k = 0, x0 = 0, end = 1]) => k > 0 && Math.abs(x0) < 0.9 && end > 0.02 && end < 1.02,
  },
  {
    name: 'autocatalytic',
    words: 'autocatalytic',
    parameters: ['k_a0_per_s', 'x0', 'seed'],
    value: ([k = 0, x0 = 0, seed = 0.01], t) => {
      const b = Math.abs(seed) + 1e-9;
      const start = (b + x0) / (1 - x0);
      return 1 - (1 + b) / (1 + start * Math.exp(Math.min(500, (1 + b) * k * t)));
    },
    start: (t, x) => [
      [4 * guessRate(t, x), 0, 0.02],
      [2 * guessRate(t, x), 0, 0.3],
    ],
    isSensible: ([k = 0, x0 = 0, seed = 0]) => k > 0 && Math.abs(x0) < 0.9 && Math.abs(seed) < 20,
  },
  {
    name: 'induction',
    words: 'first order after an induction time',
    parameters: ['k_per_s', 'induction_s'],
    value: ([k = 0, induction = 0], t) => (t <= induction ? 0 : 1 - Math.exp(-k * (t - induction))),
    start: (t, x) => {
      const first = t.find((_, index) => x[index]! > 0.03) ?? 0;
      return [[1.3 * guessRate(t, x), 0.7 * first]];
    },
    isSensible: ([k = 0, induction = 0]) => k > 0 && induction > 0,
  },
];
