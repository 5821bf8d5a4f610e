const counted = /(?<![\w.'-])(\d+(?:\.\d+)?)\s*(?:H|D|F|P|C|B|N|Si|Sn|Se|Li|Na|Al|Pt|Te)(?![\w'-])/;
const group = /(?:(?<![\w.])(\d+)\s*x\s*)?(?<![A-Za-z])([A-Z][A-Za-z]*?)?C?(H|F)([2-9])?(?![\w'])/;

/**
 * Takes the count of nuclei out of the terms of a listed signal: `2H`, `1 H`, `3F`, or what an assignment says
 * (`2 x CH3` is 6) when no count is written.
 *
 * @param terms  the terms between the brackets, couplings taken out
 * @returns the count, or undefined; the terms without it; the assignment that gave it
 * @source  common practice of experimental sections
 */
export function takeNuclei(terms: string): {
  readonly count: number | undefined;
  readonly rest: string;
  readonly assignment?: string;
} {
  const plain = counted.exec(terms);
  if (plain !== null) return { count: Number(plain[1]), rest: terms.replace(counted, ' , ') };
  const parts = terms.split(/[,;]/);
  const index = parts.findIndex((part) => /[A-Z]/.test(part) && group.test(part));
  const match = index < 0 ? null : group.exec(parts[index]!);
  if (match === null) return { count: undefined, rest: terms };
  const count = Number(match[1] ?? 1) * Number(match[4] ?? 1);
  const rest = parts.filter((_, other) => other !== index).join(',');
  return { count, rest, assignment: parts[index]!.trim() };
}
