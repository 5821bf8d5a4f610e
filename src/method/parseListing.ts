import { fail, ok, type Problem, type Result } from '../base/result.js';
import { type Listed, parseListed } from '../pattern/parseListed.js';
import { patternProblem } from '../pattern/patternProblem.js';
import { solventName } from './solvents.js';

/** The listed signals of one compound, as an experimental section gives them. */
export interface Listing {
  /** Empty when the text names none. */
  readonly name: string;
  readonly signals: readonly Listed[];
  readonly observeMhz?: number;
  readonly solvent?: string;
}

const textMax = 200_000;
const compoundsMax = 100;
const shift = String.raw`-?\d+(?:[.,]\d+)?`;
/** A shift or a range, then an opening bracket: the start of an entry. Not a decimal inside one. */
const entryStart = new RegExp(
  String.raw`(?<![\w.,-])(${shift}(?:\s*(?:[-\u2010-\u2015\u2212]|to)\s*${shift})?)\s*(?:ppm)?\s*(?=\((?!\d+\s*(?:MHz|K\b)))`,
  'gi',
);

/**
 * Reads experimental sections: one compound per paragraph, `Name: 1H NMR (400 MHz, CDCl3) 4.12 (q, J = 7.1 Hz, 2H), 1.26 (t, ...)`.
 *
 * @param text     paragraphs divided by empty lines; without any, each line that has a name and a colon is a compound
 * @param nucleus  sections of other nuclei are passed over when they are headed
 * @returns compounds with their signals, in order
 * @errors  listing-empty, listing-too-large, and those of `parseListed` with the compound's name
 * @source  common practice of experimental sections
 */
export function parseListing(text: string, nucleus: string): Result<readonly Listing[]> {
  if (text.length > textMax)
    return fail(patternProblem('listing-too-large', `${text.length} characters; at most ${textMax} are read`));
  const listings: Listing[] = [];
  for (const paragraph of paragraphsOf(text)) {
    const listing = readParagraph(paragraph, nucleus);
    if (!listing.ok) return listing;
    if (listing.value.signals.length > 0) listings.push(listing.value);
    if (listings.length > compoundsMax) return fail(patternProblem('listing-too-large', `more than ${compoundsMax} compounds`));
  }
  if (listings.length > 0) return ok(listings);
  const hint = 'Write them as in a paper: 1H NMR (400 MHz, CDCl3) 4.12 (q, J = 7.1 Hz, 2H), 1.26 (t, J = 7.1 Hz, 3H).';
  return fail(patternProblem('listing-empty', `no listed ${nucleus} signals were found`, hint));
}

function paragraphsOf(text: string): string[] {
  const plain = text.replace(/\r\n?/g, '\n');
  const lines = plain.split('\n').filter((line) => !/^\s*#/.test(line));
  const paragraphs = lines.join('\n').split(/\n\s*\n/);
  // Several named lines in one block are several compounds.
  return paragraphs.flatMap((paragraph) => {
    const starts = paragraph.split('\n').filter((line) => nameOf(line) !== '');
    return starts.length > 1 ? paragraph.split(/\n(?=[^\n:(]*[A-Za-z][^\n:(]*:)/) : [paragraph];
  });
}

function readParagraph(paragraph: string, nucleus: string): Result<Listing> {
  const name = nameOf(paragraph) || headLine(paragraph);
  const body = paragraph.slice(paragraph.indexOf(name) + name.length);
  const section = sectionOf(body, nucleus);
  const head = /\bNMR\b[^()]*\(([^)]*)\)/i.exec(section)?.[1] ?? '';
  const observe = /(\d+(?:\.\d+)?)\s*MHz/i.exec(head)?.[1];
  const solvent = head
    .split(/[,;]/)
    .map((part) => solventName(part.replace(/[\u2080-\u2089]/g, (digit) => String(digit.charCodeAt(0) - 0x2080))))
    .find((found) => found !== undefined);
  const signals: Listed[] = [];
  for (const entry of entriesOf(section)) {
    const listed = parseListed(entry);
    if (!listed.ok) return fail(named(listed.problem, name));
    signals.push(listed.value);
  }
  return ok({
    name,
    signals,
    ...(observe !== undefined ? { observeMhz: Number(observe) } : {}),
    ...(solvent !== undefined ? { solvent } : {}),
  });
}

/** The words before the first colon, unless they already hold data. */
function nameOf(text: string): string {
  const match = /^\s*([^:\n(]*(?:\([^)\d][^)]*\))?[^:\n(]*):/.exec(text);
  const name = match?.[1]?.trim() ?? '';
  return /[A-Za-z]/.test(name) && !/NMR|\u03b4|\bppm\b/i.test(name) && name.length <= 200 ? name : '';
}

/** A first line of its own that holds no data. */
function headLine(text: string): string {
  const [first = '', ...rest] = text.trim().split('\n');
  const isHead = rest.length > 0 && /[A-Za-z]/.test(first) && !/NMR|\u03b4/i.test(first) && entriesOf(first).length === 0;
  return isHead && first.length <= 200 ? first.trim() : '';
}

/** The part headed by the nucleus; all of it when nothing is headed. */
function sectionOf(text: string, nucleus: string): string {
  const heads = [...text.matchAll(/([\d\u00b9\u00b2\u00b3\u2070-\u2079]{1,3})\s*([A-Z][a-z]?)(?:\{[^}]*\})?[\s-]*NMR/g)];
  if (heads.length === 0) return text;
  const parts = heads.map((match, index) => ({
    nucleus: `${plainDigits(match[1]!)}${match[2]!}`,
    text: text.slice(match.index, heads[index + 1]?.index),
  }));
  return parts
    .filter((part) => part.nucleus === nucleus)
    .map((part) => part.text)
    .join('\n');
}

function plainDigits(text: string): string {
  return text.replace(/[\u00b9\u00b2\u00b3\u2070-\u2079]/g, (digit) => {
    const code = digit.charCodeAt(0);
    return code === 0xb9 ? '1' : code === 0xb2 ? '2' : code === 0xb3 ? '3' : String(code - 0x2070);
  });
}

function entriesOf(section: string): string[] {
  const entries: string[] = [];
  let end = 0;
  for (const match of section.matchAll(entryStart)) {
    if (match.index < end) continue;
    const open = match.index + match[0].length;
    end = closing(section, open) + 1;
    const after = /^[^,;.\n(]{0,60}/.exec(section.slice(end))?.[0] ?? '';
    entries.push(`${section.slice(match.index, end)}${after}`.trim());
  }
  return entries;
}

function closing(text: string, open: number): number {
  let depth = 0;
  for (let index = open; index < text.length; index++) {
    if (text[index] === '(') depth++;
    if (text[index] === ')' && --depth === 0) return index;
  }
  return text.length;
}

function named(problem: Problem, name: string): Problem {
  return name === '' ? problem : { ...problem, message: `${name}: ${problem.message}` };
}
