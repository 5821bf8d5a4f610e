import type { DraftSource } from '../method/draftMethod.js';

/** `CCOC(C)=O ethyl acetate`: the structure, a blank, the name. */
export function parseNamedSmiles(text: string): DraftSource {
  const [smiles = '', ...name] = text.trim().split(/\s+/);
  return { name: name.join(' '), smiles };
}

/**
 * Puts structures and listed data of one compound together: by name, else by order when every compound has both.
 *
 * @param structures  with `smiles`
 * @param listed      with listed signals
 * @returns structures in their order, then listed compounds without one
 */
export function joinSources(structures: readonly DraftSource[], listed: readonly DraftSource[]): DraftSource[] {
  const plain = (name: string) => name.toLowerCase().replace(/[^a-z0-9]/g, '');
  const isByOrder = structures.length === listed.length;
  const used = new Set<DraftSource>();
  const joined = structures.map((structure, index): DraftSource => {
    const byName = structure.name === '' ? undefined : listed.find(({ name }) => plain(name) === plain(structure.name));
    const nameless = structure.name === '' || (listed[index]?.name ?? '') === '';
    const partner = byName ?? (isByOrder && nameless ? listed[index] : undefined);
    if (partner === undefined) return structure;
    used.add(partner);
    return {
      ...structure,
      name: structure.name || partner.name,
      ...(partner.listed !== undefined ? { listed: partner.listed } : {}),
    };
  });
  return [...joined, ...listed.filter((one) => !used.has(one))];
}
