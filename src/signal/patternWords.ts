import type { Pattern, Splitting } from '../pattern/pattern.js';

const nouns: Readonly<Record<Splitting['letter'], string>> = {
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

/**
 * A pattern in words: `quartet`, `doublet of triplets`, `broad singlet`, `multiplet`.
 *
 * @source common practice
 */
export function patternWords(pattern: Pick<Pattern, 'splittings' | 'isBroad' | 'isMultiplet'>): string {
  const broad = pattern.isBroad ? 'broad ' : '';
  if (pattern.isMultiplet) return `${broad}multiplet`;
  const [first, ...rest] = pattern.splittings.filter(({ letter }) => letter !== 's');
  if (first === undefined) return `${broad}singlet`;
  return broad + [nouns[first.letter], ...rest.map(({ letter }) => `${nouns[letter]}s`)].join(' of ');
}
