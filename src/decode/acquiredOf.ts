import type { AcquiredSource } from './acquisition.js';
import { type Header, headerText } from './headerOf.js';
import { shown, tolerated } from './jcampProblem.js';
import { type HeaderTime, parseDate } from './parseDate.js';

/**
 * Finds the time of acquisition: LONGDATE, else DATE with TIME, else DATE alone. A time within the date comes before TIME.
 *
 * A date that cannot be read for certain is flagged and left out; it is never guessed.
 */
export function acquiredOf(header: Header): { acquired?: string; acquiredSource: AcquiredSource } {
  const time = headerText(header, 'TIME');
  const long = readTime(header, 'LONGDATE', headerText(header, 'LONGDATE'), time);
  if (long) return stated(header, long, long.hasTime ? 'long-date' : 'date-only');
  const short = readTime(header, 'DATE', headerText(header, 'DATE'), time);
  if (short) return stated(header, short, short.hasTime ? 'date-and-time' : 'date-only');
  return { acquiredSource: 'none' };
}

function readTime(header: Header, label: string, text: string | undefined, time?: string): HeaderTime | undefined {
  if (text === undefined) return undefined;
  const parsed = parseDate(text, time);
  if (typeof parsed !== 'string') return parsed;
  const whole = time === undefined ? text : `${text} ${time}`;
  const reason = parsed === 'ambiguous' ? 'day and month cannot be told apart' : 'it is not understood';
  header.flags.push(tolerated('jcamp-date-unreadable', `##${label}= "${shown(whole)}" is not used: ${reason}`));
  return undefined;
}

function stated(header: Header, time: HeaderTime, acquiredSource: AcquiredSource) {
  if (time.hasTime && !time.hasZone)
    header.flags.push(
      tolerated('jcamp-time-zone-missing', `the time of acquisition has no zone and is taken as UTC: ${time.iso}`),
    );
  return { acquired: time.iso, acquiredSource };
}
