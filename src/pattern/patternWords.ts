import { parsePattern } from './parsePattern.js';
import type { Pattern, Splitting } from './pattern.js';

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
 * A pattern in words: `quartet`, `doublet of triplets`, `broad singlet`, `multiplet`.
 *
 * @source common practice
 */
export function patternNoun(pattern: Pick<Pattern, 'splittings' | 'isBroad' | 'isMultiplet'>): string {
  const broad = pattern.isBroad ? 'broad ' : '';
  if (pattern.isMultiplet) return `${broad}multiplet`;
  const [first, ...rest] = pattern.splittings.filter(({ letter }) => letter !== 's');
  if (first === undefined) return `${broad}${names.s}`;
  return broad + [names[first.letter], ...rest.map(({ letter }) => `${names[letter]}s`)].join(' of ');
}

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
  const noun = patternNoun(parsed.value);
  return `${/^[aeiou]/.test(noun) ? 'an' : 'a'} ${noun}`;
}

/** `three neighbours`, `no neighbours`, `one neighbour`. */
export function countWords(count: number, noun: string): string {
  return `${counts[count] ?? count} ${noun}${count === 1 ? '' : 's'}`;
}
