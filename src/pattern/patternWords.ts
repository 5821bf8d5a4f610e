import { parsePattern } from './parsePattern.js';
import type { Splitting } from './pattern.js';

const names: Readonly<Record<Splitting['letter'], string>> = {
  s: 'singlet',
  d: 'doublet',
  t: 'triplet',
  q: 'quartet',
  quint: 'quintet',
  sext: 'sextet',
  sept: 'septet',
  oct: 'octet',
  non: 'nonet',
};
const counts = ['no', 'one', 'two', 'three', 'four', 'five', 'six', 'seven', 'eight', 'nine', 'ten', 'eleven', 'twelve'];

/**
 * A pattern in words, with its article: `q` is "a quartet", `dq` "a doublet of quartets", `br s` "a broad singlet".
 *
 * @param text  pattern as printed
 * @returns words; the text itself when it is not a pattern
 * @source  common practice
 */
export function patternWords(text: string): string {
  const parsed = parsePattern(text, []);
  if (!parsed.ok) return text;
  const { splittings, isBroad, isMultiplet } = parsed.value;
  const broad = isBroad ? 'broad ' : '';
  if (isMultiplet) return `a ${broad}multiplet`;
  const words = splittings.map(({ letter }) => names[letter]);
  const body = words.length === 0 ? names.s : words.map((word, index) => (index === 0 ? word : `${word}s`)).join(' of ');
  return `${/^[aeiou]/.test(broad + body) ? 'an' : 'a'} ${broad}${body}`;
}

/** `three neighbours`, `no neighbours`, `one neighbour`. */
export function countWords(count: number, noun: string): string {
  return `${counts[count] ?? count} ${noun}${count === 1 ? '' : 's'}`;
}
