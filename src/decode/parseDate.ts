/** A time as the header states it. */
export interface HeaderTime {
  /** ISO 8601 UTC, fractions kept. */
  readonly iso: string;
  readonly hasTime: boolean;
  readonly hasZone: boolean;
}

const months = 'JAN FEB MAR APR MAY JUN JUL AUG SEP OCT NOV DEC'.split(' ');
const clock = String.raw`(?<hour>\d{1,2}):(?<minute>\d{2})(?::(?<second>\d{2})(?<fraction>[.,]\d{1,9})?)?`;
const zone = String.raw`\s*(?<zone>Z|UTC|GMT|[+-]\d{2}:?\d{2})?`;
const timePart = new RegExp(`^${clock}${zone}$`, 'i');
const yearFirst = /^(?<year>\d{4})([/\-.])(?<month>\d{1,2})\2(?<day>\d{1,2})$/;
const yearLast = /^(?<one>\d{1,2})([/\-.])(?<two>\d{1,2})\2(?<year>\d{4})$/;
const named = /^(?:[A-Z]{3,9},?\s+)?(?<day>\d{1,2})[\s-](?<month>[A-Z]{3})[A-Z]*\.?[\s-,]+(?<year>\d{4})$/i;
const namedYearFirst = /^(?<year>\d{4})[\s-](?<month>[A-Z]{3})[A-Z]*[\s-](?<day>\d{1,2})$/i;
const timeInside =
  /^(?:[A-Z]{3,9},?\s+)?(?<month>[A-Z]{3})[A-Z]*\s+(?<day>\d{1,2})\s+(?<time>\d{1,2}:\d{2}:\d{2})\s+(?<year>\d{4})$/i;

/**
 * Parses a date, with or without a time and a zone, in the forms that occur in LONGDATE and DATE.
 *
 * Year first (`2026/03/14 19:31:00.5 +0100`, ISO 8601), day first (`14/03/2026`, `14.03.2026`), month names (`14-MAR-2026`,
 * `Sat Mar 14 19:31:00 2026`). Day and month as numbers with slashes or dashes are told apart only when one of them exceeds 12 or
 * both are equal; with points the day comes first (common practice). Two-digit years are not understood. No zone: UTC.
 *
 * @param text     date, or date and time
 * @param timeText a separate time, as in `##TIME=`
 * @returns the time, or in one word why not
 * @source JCAMP-DX 5.01 (LONGDATE), ISO 8601
 */
export function parseDate(text: string, timeText?: string): HeaderTime | 'unreadable' | 'ambiguous' {
  const plain = text.trim().slice(0, 80).replace(/\s+/g, ' ');
  const inside = timeInside.exec(plain)?.groups;
  if (inside) return assemble({ year: inside.year!, month: monthOf(inside.month!), day: inside.day! }, inside.time!);
  const split = /^(.*?\d)(?:T| )(\d{1,2}:\d{2}.*)$/i.exec(plain);
  const date = readDay((split?.[1] ?? plain).trim());
  return typeof date === 'string' ? date : assemble(date, split?.[2] ?? timeText?.trim().slice(0, 40));
}

interface Day {
  readonly year: string;
  readonly month: string;
  readonly day: string;
}

function readDay(text: string): Day | 'unreadable' | 'ambiguous' {
  const first = yearFirst.exec(text)?.groups;
  if (first) return { year: first.year!, month: first.month!, day: first.day! };
  const word = (named.exec(text) ?? namedYearFirst.exec(text))?.groups;
  if (word) return { year: word.year!, month: monthOf(word.month!), day: word.day! };
  const match = yearLast.exec(text);
  const last = match?.groups;
  if (!last) return 'unreadable';
  const [one, two] = [Number(last.one), Number(last.two)];
  if (one > 12 || one === two || match[2] === '.') return { year: last.year!, month: last.two!, day: last.one! };
  return two > 12 ? { year: last.year!, month: last.one!, day: last.two! } : 'ambiguous';
}

function monthOf(name: string): string {
  return String(months.indexOf(name.slice(0, 3).toUpperCase()) + 1);
}

function assemble({ year, month, day }: Day, timeText: string | undefined): HeaderTime | 'unreadable' {
  const time = timeText === undefined ? undefined : timePart.exec(timeText)?.groups;
  if (timeText !== undefined && !time) return 'unreadable';
  const [hour, minute, second] = [time?.hour, time?.minute, time?.second].map((part) => Number(part ?? 0)) as [
    number,
    number,
    number,
  ];
  const ms = Date.UTC(Number(year), Number(month) - 1, Number(day), hour, minute, second);
  const check = new Date(ms);
  const isReal =
    check.getUTCMonth() === Number(month) - 1 && check.getUTCDate() === Number(day) && hour < 24 && minute < 60 && second < 60;
  if (!isReal || Number(year) < 1900) return 'unreadable';
  const zoneMinutes = minutesOfZone(time?.zone);
  if (Math.abs(zoneMinutes) > 14 * 60) return 'unreadable';
  const fraction = (time?.fraction ?? '').replace(',', '.').replace(/0+$/, '').replace(/\.$/, '');
  const iso = new Date(ms - zoneMinutes * 60_000).toISOString().replace(/\.\d+Z$/, `${fraction}Z`);
  return { iso, hasTime: time !== undefined, hasZone: time?.zone !== undefined };
}

function minutesOfZone(text: string | undefined): number {
  const match = /^([+-])(\d{2}):?(\d{2})$/.exec(text ?? '');
  return match ? (match[1] === '-' ? -1 : 1) * (Number(match[2]) * 60 + Number(match[3])) : 0;
}
