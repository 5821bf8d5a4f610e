import { createHash } from 'node:crypto';

/** Lower-case hexadecimal SHA-256 of bytes or of the UTF-8 form of a text. */
export function sha256(bytes: Uint8Array | string): string {
  return createHash('sha256').update(bytes).digest('hex');
}
