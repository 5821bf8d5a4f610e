import { ok, type Result } from '../base/result.js';
import { type Header, headerText, numberOf } from './headerOf.js';
import { refuse, shown } from './jcampProblem.js';
import type { HeaderNumber } from './parseNumber.js';

/** The words of a list record of an NTUPLES block; missing record: empty list. */
export function wordList(header: Header, label: string): string[] {
  return (headerText(header, label) ?? '').split(',').map((word) => word.trim());
}

/**
 * The numbers of a list record, one for each symbol; empty entries are undefined.
 *
 * The entry of the page variable at the end may be missing. Decimal commas are understood only where blanks separate the entries and
 * only one reading has as many entries as there are symbols.
 *
 * @param symbolCount  entries of `##SYMBOL=`
 * @param neededCount  entries that must be there (without the page variable)
 * @errors jcamp-list-length, jcamp-number, jcamp-comma-ambiguous
 */
export function numberList(
  header: Header,
  label: string,
  symbolCount: number,
  neededCount: number,
): Result<(HeaderNumber | undefined)[] | undefined> {
  const record = header.records.get(label);
  const text = headerText(header, label);
  if (!record || text === undefined) return ok(undefined);
  const fits = (words: readonly string[]) => words.length === symbolCount || words.length === neededCount;
  const plain = splitList(text, /,/);
  const spaced = splitList(text, /,\s+|;\s*/);
  const hasDecimalCommas = fits(spaced) && spaced.some((word) => word.includes(','));
  const where = { line: record.line, label: record.writtenLabel };
  if (fits(plain) && hasDecimalCommas && plain.length !== spaced.length)
    return refuse('jcamp-comma-ambiguous', `##${label}= (line ${record.line}) "${shown(text)}" can be read in two ways`, where);
  const words = fits(plain) ? plain : hasDecimalCommas ? spaced : undefined;
  if (!words)
    return refuse(
      'jcamp-list-length',
      `##${label}= (line ${record.line}) "${shown(text)}" has ${plain.length} entries; ##SYMBOL= has ${symbolCount}`,
      where,
    );
  const numbers: (HeaderNumber | undefined)[] = [];
  for (const word of words) {
    if (word === '') {
      numbers.push(undefined);
      continue;
    }
    const number = numberOf(header, record, word);
    if (!number.ok) return number;
    numbers.push(number.value);
  }
  return ok(numbers);
}

/** Splits a list; an empty last entry belongs to the page variable and may be there or not. */
function splitList(text: string, separator: RegExp): string[] {
  return text.split(separator).map((word) => word.trim());
}
