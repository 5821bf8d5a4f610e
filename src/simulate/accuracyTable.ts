import type { BedScore } from './testBedScore.js';

/** One goal beside what was measured. */
export interface GoalRow {
  readonly goal: string;
  readonly wanted: string;
  readonly measured: string;
  /** Undefined when no case could be asked. */
  readonly isMet?: boolean;
  readonly cases: number;
  /** Seeds of the cases that missed, worst first. */
  readonly missed: readonly number[];
}

/** The goals of the spectrum station over many scored cases. */
export function accuracyTable(scores: readonly BedScore[]): GoalRow[] {
  const clear = scores.filter(({ signalToNoise }) => signalToNoise >= 200);
  const faint = scores.filter(({ signalToNoise }) => signalToNoise < 200);
  return [
    within('phase error at lines above 20 sigma, S/N from 200, degrees', clear, ({ phaseErrorDeg }) => phaseErrorDeg, 1, 0.99),
    within('phase error at lines above 20 sigma, S/N 30 to 200, degrees', faint, ({ phaseErrorDeg }) => phaseErrorDeg, 3, 0.99),
    within('onset, points', scores, ({ onsetErrorPoints }) => onsetErrorPoints, 0.05, 0.99),
    within('onset taken for none, or the reverse, cases', scores, asNumber('isOnsetMistaken'), 0.5, 1),
    within('baseline mean, sigma', scores, ({ baselineMean }) => baselineMean, 0.05, 0.95),
    within('baseline rms structure, sigma', scores, ({ baselineRms }) => baselineRms, 0.1, 0.95),
    within('area bias of a 20-sigma signal, share', scores, ({ areaBias }) => areaBias, 0.01, 0.95),
    within(
      'noise, relative error',
      scores,
      ({ noiseRatio }) => (noiseRatio !== undefined ? Math.abs(noiseRatio - 1) : undefined),
      0.03,
      0.95,
    ),
    within('axis not found (refused or wrong), cases', scores, (score) => (score.axis === 'right' ? 0 : 1), 0.5, 0.99),
    within('axis wrong in silence, cases', scores, (score) => (isSilentlyWrong(score) ? 1 : 0), 0.5, 1),
    within('reference line, Hz', scores, ({ referenceErrorHz }) => referenceErrorHz, 0.1, 0.95),
  ];
}

const asNumber = (key: 'isOnsetMistaken') => (score: BedScore) => (score[key] === undefined ? undefined : score[key] ? 1 : 0);

const isSilentlyWrong = ({ axis, flags }: BedScore) =>
  axis === 'wrong' && !flags.includes('axis-uncertain') && !flags.includes('reference-missing');

function within(
  goal: string,
  scores: readonly BedScore[],
  measure: (score: BedScore) => number | undefined,
  limit: number,
  share: number,
): GoalRow {
  const asked = scores.flatMap((score) => {
    const value = measure(score);
    return value === undefined || Number.isNaN(value) ? [] : [{ seed: score.seed, value }];
  });
  const missed = asked.filter(({ value }) => value > limit).sort((a, b) => b.value - a.value);
  const wanted = `<= ${limit} in ${100 * share} %`;
  if (asked.length === 0) return { goal, wanted, measured: 'no case', cases: 0, missed: [] };
  const values = asked.map(({ value }) => value).sort((a, b) => a - b);
  const at = (quantile: number) => values[Math.min(values.length - 1, Math.floor(quantile * values.length))]!;
  const met = 1 - missed.length / asked.length;
  const measured = `${(100 * met).toFixed(1)} %; median ${at(0.5).toPrecision(2)}, 95 % ${at(0.95).toPrecision(2)}, worst ${at(1).toPrecision(2)}`;
  return { goal, wanted, measured, isMet: met >= share, cases: asked.length, missed: missed.map(({ seed }) => seed) };
}

/** The rows as text, one goal a line. */
export function printTable(rows: readonly GoalRow[]): string {
  const line = ({ goal, wanted, measured, isMet, cases, missed }: GoalRow) =>
    `${isMet === undefined ? '----' : isMet ? 'pass' : 'MISS'}  ${goal}: ${wanted}; ${measured} (${cases} cases)${
      missed.length > 0 ? `  missed by seeds ${missed.slice(0, 12).join(' ')}` : ''
    }\n`;
  return rows.map(line).join('');
}
