const lengthMax = 48;

/**
 * Makes ids of names: letters, digits and dashes, unique within the list.
 *
 * @param names  any text
 * @returns shape as `names`; equal names get `-a`, `-b` ...
 */
export function uniqueIds(names: readonly string[]): string[] {
  const plain = names.map((name) => {
    const id = name
      .normalize('NFKD')
      .replace(/[^A-Za-z0-9]+/g, '-')
      .replace(/^-+|-+$/g, '')
      .slice(0, lengthMax);
    return id === '' ? 'signal' : id;
  });
  const used = new Set<string>();
  return plain.map((id) => {
    const isRepeated = plain.filter((other) => other === id).length > 1;
    for (let count = 0; ; count++) {
      const tail = isRepeated || count > 0 ? `-${count < 26 ? String.fromCharCode(97 + count) : count}` : '';
      if (used.has(`${id}${tail}`)) continue;
      used.add(`${id}${tail}`);
      return `${id}${tail}`;
    }
  });
}
