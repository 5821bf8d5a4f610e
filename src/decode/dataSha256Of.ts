import { createHash } from 'node:crypto';
import { canonicalJson } from '../base/canonicalJson.js';
import type { Acquisition } from './acquisition.js';

/**
 * SHA-256 of the decoded numbers and of what places them: the same data under another title, date or table form hash alike.
 *
 * @param acquisition everything but the hash
 * @returns lower-case hexadecimal digest of the placing facts as canonical JSON, then the ordinates as little-endian doubles
 */
export function dataSha256Of(acquisition: Omit<Acquisition, 'dataSha256'>): string {
  const { kind, real, imag, dwellS, spectralWidthHz, axis, nucleus, observeMhz } = acquisition;
  const hash = createHash('sha256');
  hash.update(canonicalJson({ kind, points: real.length, dwellS, spectralWidthHz, axis, nucleus, observeMhz }));
  for (const channel of imag ? [real, imag] : [real])
    hash.update(new Uint8Array(channel.buffer, channel.byteOffset, channel.byteLength));
  return hash.digest('hex');
}
