import type { Path } from './filePort.js';

/** Joins names that may hold any bytes. */
export function joinPath(folder: Path, ...names: readonly Path[]): Path {
  if (typeof folder === 'string' && names.every((name) => typeof name === 'string')) return [folder, ...names].join('/');
  const parts = [folder, ...names].map((part) => (typeof part === 'string' ? Buffer.from(part) : part));
  return Buffer.concat(parts.flatMap((part, index) => (index === 0 ? [part] : [Buffer.from('/'), part])));
}

/** A path as text for people: bytes that are not UTF-8 become `\xNN`. */
export function pathText(path: Path): string {
  return typeof path === 'string' ? path : nameText(path);
}

/** A name as text: UTF-8 when it is, else with the odd bytes as `\xNN`. */
export function nameText(name: Buffer): string {
  if (isUtf8Name(name)) return name.toString('utf8');
  let text = '';
  for (const byte of name)
    text += byte >= 0x20 && byte < 0x7f ? String.fromCharCode(byte) : `\\x${byte.toString(16).padStart(2, '0')}`;
  return text;
}

export function isUtf8Name(name: Buffer): boolean {
  return Buffer.from(name.toString('utf8'), 'utf8').equals(name);
}

/** One character a byte: a map key that two different names never share. */
export function byteKey(name: Buffer): string {
  return name.toString('latin1');
}
