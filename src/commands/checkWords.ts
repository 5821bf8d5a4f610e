import type { CheckedSignal, SignalAtField } from '../method/checkReport.js';
import { countWords, patternWords } from '../pattern/patternWords.js';
import { plainNumber } from './plainNumber.js';

/** Above it the peaks are counted, not listed. */
const listedPeaksMax = 9;

/** What the structure says about a signal, in words. */
export function structureWords({ structure }: CheckedSignal): string | undefined {
  if (structure === undefined) return undefined;
  if (structure.labels.length === 0) return 'no group of the structure can be this signal';
  const labels = [...new Set(structure.labels)]
    .map((label) => {
      const count = structure.labels.filter((other) => other === label).length;
      return count === 1 ? label : `${count} x ${label}`;
    })
    .join(' and ');
  if (structure.expected === undefined) return `${labels}, the counts agree`;
  const neighbours = countWords(structure.expectedNeighbours ?? 0, 'neighbour');
  const verdict = structure.agrees ? 'agrees' : 'the method disagrees';
  return `${labels} has ${neighbours}: ${patternWords(structure.expected)} is expected, ${verdict}`;
}

/** How the pattern of a signal is computed, in words. */
export function basisWords({ basis, partners, atFields }: CheckedSignal): string {
  if (basis === 'undeclared') return 'no lines are declared';
  if (atFields[0]?.lines.length === 1) return 'one line';
  if (basis === 'first-order') return 'first order, no partner among the signals of the species';
  const named = partners.map(({ signal, couplingHz, origin }) => `${signal} (${plainNumber(couplingHz, 1)} Hz, ${origin})`);
  return `exactly, coupled to ${named.join(' and ')}`;
}

/** What a signal looks like at a field, in words: `4 peaks 1.0 : 3.2 : 3.6 : 1.3, 21.4 Hz (0.357 ppm) wide`. */
export function fieldWords({ peaks, spanHz, observeMhz, uFactor }: SignalAtField): string {
  if (peaks.length === 0) return 'not drawn';
  const smallest = Math.min(...peaks.map(({ height }) => height));
  const ratio =
    peaks.length > 1 && peaks.length <= listedPeaksMax
      ? ` ${peaks.map(({ height }) => plainNumber(height / smallest, 1)).join(' : ')}`
      : '';
  const width = peaks.length > 1 ? `, ${plainNumber(spanHz, 1)} Hz (${plainNumber(spanHz / observeMhz, 3)} ppm) wide` : '';
  const cost =
    uFactor < 1.05
      ? ''
      : Number.isFinite(uFactor)
        ? `; u times ${plainNumber(uFactor, 1)} for its neighbours`
        : '; not separable from its neighbours';
  return `${peaks.length} peak${peaks.length === 1 ? '' : 's'}${ratio}${width}${cost}`;
}
