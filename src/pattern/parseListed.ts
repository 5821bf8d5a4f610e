import { fail, ok, type Result } from '../base/result.js';
import { parsePattern } from './parsePattern.js';
import type { Pattern } from './pattern.js';
import { patternProblem } from './patternProblem.js';
import { takeCouplings } from './takeCouplings.js';
import { takeNuclei } from './takeNuclei.js';

/** One entry of an experimental section. */
export interface Listed {
  /** ppm; of a range its middle. */
  readonly shiftPpm: number;
  /** [low, high] ppm when a range was written. */
  readonly rangePpm?: readonly [number, number];
  readonly pattern: Pattern;
  readonly nuclei: number;
  /** What is left of the entry, usually the assignment: `OCH2CH3`, `H-4`. */
  readonly assignment?: string;
}

const listedTextMax = 400;
const shiftPpmMax = 10_000;
const nucleiMax = 1000;
const number = String.raw`[+-]?\d+(?:\.\d+)?`;
const head = new RegExp(
  String.raw`^(${number})(?:\s*(?:-|to|\.{2,3}|~)\s*(${number}))?\s*(?:ppm)?\s*[,:;]?\s*(?=[([{]|[^\d.]|$)`,
  'i',
);

/**
 * Reads one entry of an experimental section, terms in any order: `4.12 (q, J = 7.1 Hz, 2H, OCH2)`, `7.40-7.28 (m, 5H)`.
 *
 * @param text  one entry; a delta sign, `ppm`, dashes of any kind, decimal commas and a trailing assignment are understood
 * @returns shift in ppm, range when given, pattern with couplings in Hz, and the count of nuclei
 * @errors  listed-unreadable, listed-pattern-missing, listed-nuclei-missing, listed-ambiguous, and those of `parsePattern`
 * @source  common practice of the experimental sections of papers
 */
export function parseListed(text: string): Result<Listed> {
  const plain = normalise(text);
  const start = text.length > listedTextMax ? null : head.exec(plain);
  if (start === null) return fail(unreadable(text));
  const first = Number(start[1]);
  const second = start[2] === undefined ? undefined : Number(start[2]);
  if (Math.max(Math.abs(first), Math.abs(second ?? 0)) > shiftPpmMax) return fail(unreadable(text));
  const couplings = takeCouplings(openBrackets(plain.slice(start[0].length)));
  const nuclei = takeNuclei(couplings.rest);
  const found = takePattern(nuclei.rest);
  if (found.patterns.length === 0) return fail(missing('pattern', text, 'a splitting pattern such as s, q or dd'));
  if (found.patterns.length > 1) return fail(ambiguous(text, found.patterns));
  if (nuclei.count === undefined) return fail(missing('nuclei', text, 'a number of nuclei such as 2H'));
  if (!Number.isInteger(nuclei.count) || nuclei.count < 1 || nuclei.count > nucleiMax) {
    return fail(missing('nuclei', text, `a whole number of nuclei from 1 to ${nucleiMax}, not ${nuclei.count},`));
  }
  const pattern = parsePattern(found.patterns[0]!, couplings.couplingsHz);
  if (!pattern.ok) return pattern;
  const assignment = [nuclei.assignment, ...found.others].filter((part) => part !== undefined && part !== '').join(', ');
  return ok({
    shiftPpm: second === undefined ? first : Math.round(((first + second) / 2) * 1e6) / 1e6,
    ...(second !== undefined && second !== first
      ? { rangePpm: [Math.min(first, second), Math.max(first, second)] as const }
      : {}),
    pattern: pattern.value,
    nuclei: nuclei.count,
    ...(assignment !== '' ? { assignment } : {}),
  });
}

/** One kind of dash, minus, blank and digit; no delta; a decimal comma becomes a point when the shift is written with one. */
function normalise(text: string): string {
  const plain = text
    .replace(/[\u2010-\u2015\u2212\ufe63\uff0d]/g, '-')
    .replace(/[\u00a0\u2000-\u200b\u202f\u3000\t\r\n]/g, ' ')
    .replace(/\u00d7/g, 'x')
    .replace(/[\u2080-\u2089]/g, (digit) => String.fromCharCode(digit.charCodeAt(0) - 0x2080 + 48))
    .replace(/^\s*(?:\u03b4|\u1e9f|\ud835\udeff|delta|d(?=\s+[-+\d]))\s*(?:[_(]?[HFCP][)]?)?\s*[=:]?\s*/i, '')
    .trim();
  return /^[+-]?\d+,\d+(?!\s*,\s*\d)\s*(?:ppm\b|[-([]|to\b)/i.test(plain) ? plain.replace(/(\d),(?=\d)/g, '$1.') : plain;
}

/** The bracket that wraps the terms opens up; what follows it is an assignment. Inner brackets (`(CH3)2CH`) stay. */
function openBrackets(body: string): string {
  if (!/^[([{]/.test(body)) return body.replace(/[.;,\s]+$/, '');
  let depth = 0;
  for (let index = 0; index < body.length; index++) {
    if (/[([{]/.test(body[index]!)) depth++;
    else if (/[)\]}]/.test(body[index]!)) depth--;
    if (depth === 0) return `${body.slice(1, index)}, ${body.slice(index + 1)}`.replace(/[.;,\s]+$/, '');
  }
  return body.slice(1);
}

function takePattern(rest: string): { readonly patterns: readonly string[]; readonly others: readonly string[] } {
  const terms = rest
    .split(/[,;]/)
    .map((term) => term.trim())
    .filter((term) => term !== '');
  const patterns: string[] = [];
  const others: string[] = [];
  for (const term of terms) {
    const isBroadOnly = /^(?:br\.?|broad|b)$/i.test(term);
    // `s, br` and `br, s` are one pattern in two terms.
    if (isBroadOnly && patterns.length === 1) patterns[0] = `br ${patterns[0]}`;
    else if (patterns.length === 1 && /^(?:br\.?|broad|b)$/i.test(patterns[0]!) && parsePattern(term, []).ok)
      patterns[0] = `br ${term}`;
    else if (parsePattern(term, []).ok) patterns.push(term);
    else others.push(term);
  }
  return { patterns, others };
}

function unreadable(text: string) {
  const message = `"${text.slice(0, 60)}" does not begin with a shift in ppm`;
  return patternProblem('listed-unreadable', message, 'Write it as in an experimental section: 4.12 (q, J = 7.1 Hz, 2H).');
}

function missing(what: 'pattern' | 'nuclei', text: string, wanted: string) {
  const message = `"${text.slice(0, 60)}" lacks ${wanted}`;
  return patternProblem(`listed-${what}-missing`, message, 'Write it as in an experimental section: 4.12 (q, J = 7.1 Hz, 2H).');
}

function ambiguous(text: string, patterns: readonly string[]) {
  const message = `"${text.slice(0, 60)}" holds ${patterns.length} patterns (${patterns.join('; ')}); one is expected`;
  return patternProblem('listed-ambiguous', message, 'Leave the one that the signal shows.');
}
