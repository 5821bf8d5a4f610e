import type { LedgerLine } from './ledgerLine.js';
import type { Check } from './verifyTypes.js';

const prefixLengthMin = 8;

/**
 * Looks a printed head up in the ledger. Only this finds a cut tail or an older copy: what is left of a chain is always whole.
 *
 * @param given the hash or its beginning, with or without the entry's number before it (`31 20b613f4dbe1`)
 */
export function verifyHead(lines: readonly LedgerLine[], given: string): Check {
  const match = /^\s*(?:#?(\d{1,9})[\s:/-]+)?([0-9a-f]+)\s*$/i.exec(given);
  const prefix = match?.[2]?.toLowerCase() ?? '';
  if (prefix.length < prefixLengthMin || prefix.length > 64)
    return {
      name: 'head',
      state: 'fail',
      message: `"${given}" is no ledger head: give its hash as printed, ${prefixLengthMin} characters or more`,
    };
  const line = lines.find(({ hash }) => hash.startsWith(prefix));
  if (line === undefined)
    return {
      name: 'head',
      state: 'fail',
      message: `no entry has the printed head ${prefix}: entries were cut off, or an older copy was put in place`,
    };
  const { seq } = line.entry;
  if (match?.[1] !== undefined && Number(match[1]) !== seq)
    return {
      name: 'head',
      state: 'fail',
      message: `the printed head names entry ${match[1]}, but its hash is that of entry ${seq}`,
      seq,
    };
  return {
    name: 'head',
    state: 'pass',
    message: `the printed head is entry ${seq}; ${lines.length - seq} entries follow it`,
    seq,
  };
}
