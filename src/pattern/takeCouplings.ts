/** A number that is not the start of `2H`, `3 F`, `2 x CH3` or `3J`: those letters follow counts, not couplings. */
const value = String.raw`(?:\d+\s*x\s*)?[-+]?\d+(?:\.\d+)?(?![\d.])(?!\s*(?!Hz\b|and\b)[A-Za-z\u00b9\u00b2\u00b3(])`;
const list = String.raw`${value}(?:\s*(?:Hz)?\s*(?:,|;|/|\band\b|&)\s*${value})*\s*(?:Hz\b)?`;
/** `J`, `3J`, `^3J_HH`, `J(H,H)`, `J_{1,2}`, `J1`, `Jortho`: what stands below or above the letter is read over. */
const sign = String.raw`(?:\^?\{?[1-6]\}?|[\u00b9\u00b2\u00b3\u2074-\u2076])?J(?:_?\{[^}]*\}|\([^)]*\)|_?[A-Za-z0-9',-]*(?=\s*[=\u2248~])|_?[A-Z]{1,3}(?:-[A-Z])?(?=\s))?`;
const withSign = new RegExp(String.raw`(?<![A-Za-z])${sign}\s*[=\u2248~:]?\s*(${list})`, 'g');
const withUnit = new RegExp(String.raw`(?<![\w.])(${list.replace(/\(\?:Hz\\b\)\?$/, String.raw`Hz\b`)})`, 'g');

/**
 * Takes the couplings out of the terms of a listed signal, in the written order.
 *
 * @param terms  the terms between the brackets
 * @returns couplings in Hz and the terms without them; `2 x 7.1` counts twice
 * @source  common practice of experimental sections
 */
export function takeCouplings(terms: string): { readonly couplingsHz: readonly number[]; readonly rest: string } {
  const couplingsHz: number[] = [];
  const take = (_: string, numbers: string) => {
    for (const match of numbers.matchAll(/(?:(\d+)\s*x\s*)?([-+]?\d+(?:\.\d+)?)/g)) {
      const times = Math.min(Number(match[1] ?? 1), 12);
      for (let n = 0; n < times; n++) couplingsHz.push(Number(match[2]));
    }
    return ' , ';
  };
  const signed = terms.replace(withSign, take);
  return { rest: couplingsHz.length > 0 ? signed : signed.replace(withUnit, take), couplingsHz };
}
