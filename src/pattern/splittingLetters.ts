import type { Splitting } from './pattern.js';

/** Every multiplet of n equivalent spin-1/2 neighbours that has a letter, by its number of neighbours. */
export const splittingLetters: readonly Splitting['letter'][] = ['s', 'd', 't', 'q', 'quint', 'sext', 'sept', 'oct', 'non'];

/**
 * The written forms of each letter, shortest to longest as chemists use them. Abbreviations are read in lower case only,
 * because `H`, `N` or `P` in a listing is an atom; whole words are read in any case.
 *
 * @source common practice
 */
export const writtenForms: Readonly<Record<Splitting['letter'], readonly string[]>> = {
  s: ['s', 'sing', 'singlet'],
  d: ['d', 'doub', 'doublet'],
  t: ['t', 'trip', 'triplet'],
  q: ['q', 'quart', 'quartet', 'quadruplet'],
  quint: ['p', 'pent', 'pentet', 'qn', 'qui', 'quin', 'qnt', 'quint', 'quintet', 'quintuplet'],
  sext: ['sx', 'sxt', 'sex', 'sext', 'sextet', 'hextet', 'sextuplet'],
  sept: ['spt', 'sep', 'sept', 'hept', 'hep', 'septet', 'heptet', 'septuplet'],
  oct: ['oct', 'octet'],
  non: ['non', 'nonet'],
};

/** The letter for a number of equivalent spin-1/2 neighbours, or undefined above eight. */
export function letterFor(neighbours: number): Splitting['letter'] | undefined {
  return splittingLetters[neighbours];
}
