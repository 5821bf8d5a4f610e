import type { Flag } from '../base/flag.js';
import type { MeasuredSignal } from './measured.js';

const leftOverFlagShare = 0.02;

/**
 * Flags that follow from the verdicts. Absence is no flag: a product is absent at the start.
 *
 * @returns flags in the order of the signals
 * @source  own
 */
export function flagSignals(signals: readonly MeasuredSignal[]): Flag[] {
  return signals.flatMap((signal): Flag[] => {
    if (signal.use === 'ignore') return [];
    const { key, verdict, words, leftOver } = signal;
    const message = `${key}: ${words}`;
    const flags: Flag[] = [];
    if (verdict === 'differs') flags.push({ code: 'pattern-differs', signal: key, message });
    if (verdict === 'crowded')
      flags.push({ code: 'crowded', signal: key, message, weight: isWellSplit(signal) ? 'note' : 'flag' });
    if (verdict !== 'differs' && leftOver !== undefined) {
      flags.push({ code: 'left-over', signal: key, message, weight: leftOver.share < leftOverFlagShare ? 'note' : 'flag' });
    }
    if (contradicts(signal)) flags.push({ code: 'signals-disagree', signal: key, message });
    return flags;
  });
}

/** Whether the area per nucleus contradicts that of the species' other signals. */
function contradicts({ ratioToOthers }: MeasuredSignal): boolean {
  return ratioToOthers !== undefined && Math.abs(ratioToOthers.value - 1) > Math.max(5 * ratioToOthers.u, 0.05);
}

/** Whether a crowded signal could still be measured well. */
function isWellSplit({ area, u, fittedWith }: MeasuredSignal): boolean {
  return u < 0.05 * area && fittedWith.every(({ correlation }) => Math.abs(correlation) < 0.8);
}
