import { invariant } from './result.js';

/**
 * JSON with sorted keys, no white space and shortest round-trip numbers: the one byte form that is hashed.
 *
 * @errors invariant: a number that is not finite, or a value JSON has no form for
 * @source RFC 8785 (JSON Canonicalization Scheme), whose number form is that of ECMAScript
 */
export function canonicalJson(value: unknown): string {
  if (value === null || typeof value === 'boolean' || typeof value === 'string') return JSON.stringify(value);
  if (typeof value === 'number') {
    invariant(Number.isFinite(value), 'a number in a record must be finite');
    return JSON.stringify(value);
  }
  if (Array.isArray(value)) return `[${value.map((item) => canonicalJson(item ?? null)).join(',')}]`;
  invariant(typeof value === 'object', `no JSON form for ${typeof value}`);
  const entries = Object.entries(value as Record<string, unknown>).filter(([, item]) => item !== undefined);
  entries.sort(([a], [b]) => (a < b ? -1 : a > b ? 1 : 0));
  return `{${entries.map(([key, item]) => `${JSON.stringify(key)}:${canonicalJson(item)}`).join(',')}}`;
}
