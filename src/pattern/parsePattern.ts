import { fail, ok, type Result } from '../base/result.js';
import type { Pattern, Splitting } from './pattern.js';
import { patternProblem } from './patternProblem.js';
import { splittingLetters, writtenForms } from './splittingLetters.js';

/** Above any coupling met in practice (one-bond P-H and P-F reach about 1500 Hz); beyond it a number is a slip. */
const couplingHzMax = 5000;
const factorsMax = 6;
const patternTextMax = 80;

const letterByForm = new Map(splittingLetters.flatMap((letter) => writtenForms[letter].map((form) => [form, letter] as const)));
/** Longest first, so that `sept` is not read as `s` and something else. */
const forms = [...letterByForm.keys(), 'm', 'mult', 'multiplet'].sort((a, b) => b.length - a.length || (a < b ? -1 : 1));
/** Only these stand side by side in one word (`dquint`); `triplett` is a slip, not a triplet of triplets. */
const joinable = forms.filter((form) => form.length <= 2 || /^(?:qui|quin|quint|pent|sext|sept|hept|oct|non)$/.test(form));
const isMultipletForm = (form: string) => form === 'm' || form === 'mult' || form === 'multiplet';

interface Words {
  readonly letters: readonly Splitting['letter'][];
  readonly isBroad: boolean;
  readonly isMultiplet: boolean;
}

/**
 * Reads a splitting pattern as chemists write it: `q`, `dd`, `dt`, `br s`, `app t`, `doublet of quartets`, `m`.
 *
 * @param text         the pattern alone, without couplings
 * @param couplingsHz  shape (k), Hz, in the written order; k is 0 (not given) or the number of splittings
 * @returns the pattern; `br` alone is a broad singlet; a combination with `m` (`dm`) declares no lines, as `m` does
 * @errors  pattern-unreadable, pattern-couplings-count, pattern-coupling-invalid
 * @source  common practice
 */
export function parsePattern(text: string, couplingsHz: readonly number[]): Result<Pattern> {
  const words = readWords(text);
  if (words === undefined) return fail(unreadable(text));
  const bad = couplingsHz.find((value) => !Number.isFinite(value) || value === 0 || Math.abs(value) > couplingHzMax);
  if (bad !== undefined) {
    const message = `a coupling of ${bad} Hz in "${clip(text)}"; a number other than 0, up to ${couplingHzMax} Hz, is expected`;
    return fail(patternProblem('pattern-coupling-invalid', message));
  }
  const splitting = words.letters.filter((letter) => letter !== 's');
  const expected = words.isMultiplet ? 0 : splitting.length;
  if (couplingsHz.length !== 0 && couplingsHz.length !== expected) return fail(wrongCount(text, expected, couplingsHz));
  const splittings = words.isMultiplet ? [] : splitting.map((letter, index) => toSplitting(letter, couplingsHz[index]));
  return ok({ text: printText(words), splittings, isBroad: words.isBroad, isMultiplet: words.isMultiplet });
}

function toSplitting(letter: Splitting['letter'], couplingHz: number | undefined): Splitting {
  const neighbours = splittingLetters.indexOf(letter);
  return { letter, neighbours, ...(couplingHz !== undefined ? { couplingHz } : {}) };
}

function readWords(text: string): Words | undefined {
  if (text.length > patternTextMax) return undefined;
  const plain = text.trim().replace(/[A-Z][a-z]{4,}|[A-Z]{5,}/g, (word) => word.toLowerCase());
  // `app t` or a pseudo-triplet is drawn as a triplet: the word says only that the couplings need not be equal in truth.
  const spaced = plain
    .replace(/\bapp(?:ar(?:ent)?)?\b\.?|\bpseudo-?|[\u03c8\u03a8]/g, ' ')
    .replace(/\b(?:of|x)\b|[\u00d7.,()-]/g, ' ')
    .replace(/\bbroad(?:ened)?\b|\bbr/g, ' br ')
    .replace(/\bb(?=\s|$|[sdtqm]$)/g, ' br ');
  const tokens = spaced.split(/\s+/).filter((token) => token !== '');
  const isBroad = tokens.includes('br');
  const letters: Splitting['letter'][] = [];
  let multiplets = 0;
  for (const token of tokens) {
    if (token === 'br') continue;
    const found = splitToken(token);
    if (found === undefined) return undefined;
    for (const form of found) {
      if (isMultipletForm(form)) multiplets++;
      else letters.push(letterByForm.get(form) ?? 's');
    }
  }
  if (letters.length === 0 && multiplets === 0) return isBroad ? { letters: ['s'], isBroad, isMultiplet: false } : undefined;
  const single = letters.length + multiplets;
  const valid = single <= factorsMax && multiplets <= 1 && (!letters.includes('s') || single === 1);
  return valid ? { letters, isBroad, isMultiplet: multiplets > 0 } : undefined;
}

/** `doublets` is a word, `dquint` is `d` and `quint`. Backtracks, so that `sexts` or `ts` cannot mislead it. */
function splitToken(token: string): string[] | undefined {
  const word = token.length > 5 && token.endsWith('s') ? token.slice(0, -1) : token;
  return forms.includes(word) ? [word] : splitJoined(token);
}

function splitJoined(token: string): string[] | undefined {
  if (token === '') return [];
  for (const form of joinable) {
    const tail = token.startsWith(form) ? splitJoined(token.slice(form.length)) : undefined;
    if (tail !== undefined) return [form, ...tail];
  }
  return undefined;
}

function printText(words: Words): string {
  const body = `${words.letters.join('')}${words.isMultiplet ? 'm' : ''}`;
  return words.isBroad ? `br ${body}` : body;
}

function clip(text: string): string {
  return text.length > patternTextMax ? `${text.slice(0, patternTextMax)}...` : text;
}

function unreadable(text: string) {
  const message = `"${clip(text)}" is not a splitting pattern`;
  const hint = `Write s, d, t, q, quint, sext, sept, oct, non, a combination such as dd or dt, br s, or m.`;
  return patternProblem('pattern-unreadable', message, hint);
}

function wrongCount(text: string, expected: number, couplingsHz: readonly number[]) {
  const given = couplingsHz.length;
  const message = `"${text.trim()}" takes ${expected} coupling${expected === 1 ? '' : 's'}, ${given} ${given === 1 ? 'was' : 'were'} given (${couplingsHz.join(', ')} Hz)`;
  return patternProblem('pattern-couplings-count', message, 'Give one coupling per splitting, in the written order, or none.');
}
