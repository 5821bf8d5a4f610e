import type { DraftSignal, DraftSpecies } from './draftMethod.js';

/** The frame of a proposed method. */
export interface DraftFrame {
  readonly title: string;
  readonly nucleus: string;
  readonly solvent?: string;
  /** What the draft was made from, one line each, without line breaks. */
  readonly madeFrom: readonly string[];
}

/**
 * Prints a proposed method as YAML with every guess marked as a comment.
 *
 * @returns text that `readMethod` accepts; the same input gives the same bytes
 */
export function draftYaml({ title, nucleus, solvent, madeFrom }: DraftFrame, species: readonly DraftSpecies[]): string {
  const reference = nucleus === '1H' ? 'tetramethylsilane' : keyOf(species);
  const of = species[0];
  const to = species[1];
  const lines = [
    '# A proposal, to be corrected by a chemist: every line marked "guess" was not measured.',
    ...madeFrom.map((line) => `# Made from ${plain(line)}.`),
    'kinetrail: method/1',
    `title: ${quoted(title)}`,
    'version: "1"',
    `nucleus: ${nucleus}`,
    ...(solvent !== undefined ? [`solvent: ${solvent}`] : ['# solvent: CDCl3    # name the deuterated solvent']),
    `reference: {signal: ${reference}}    # guess: name what pins your ppm scale`,
    'species:',
    ...species.flatMap(speciesLines),
    ...(of !== undefined && to !== undefined
      ? [`conversion: {of: ${idText(of.id)}, to: ${idText(to.id)}, target: 0.98}    # guess: from and to by order`]
      : []),
  ];
  return `${lines.join('\n')}\n`;
}

function speciesLines({ id, name, role, smiles, comment, signals }: DraftSpecies): string[] {
  return [
    `  - id: ${idText(id)}`,
    `    name: ${quoted(name)}`,
    `    role: ${role}${comment === undefined ? '' : `    # ${plain(comment)}`}`,
    ...(smiles !== undefined ? [`    smiles: ${quoted(smiles)}`] : []),
    '    signals:',
    ...signals.map(signalLine),
  ];
}

function signalLine({ id, listed, use, withinPpm, moves, comment }: DraftSignal): string {
  const keys = [
    `id: ${idText(id)}`,
    `listed: ${quoted(listed)}`,
    ...(withinPpm !== undefined ? [`within: ${withinPpm}`] : []),
    ...(use !== 'quantify' ? [`use: ${use}`] : []),
    ...(moves ? ['moves: true'] : []),
  ];
  return `      - {${keys.join(', ')}}${comment === undefined ? '' : `    # ${plain(comment)}`}`;
}

function keyOf(species: readonly DraftSpecies[]): string {
  const first = species.find(({ signals }) => signals.length > 0);
  return first === undefined ? 'solvent' : quoted(`${first.id}/${first.signals[0]!.id}`);
}

/** Plain where YAML cannot take it for a number, a truth value or nothing. */
function idText(id: string): string {
  const isPlain = /^[A-Za-z][A-Za-z0-9-]*$/.test(id) && !/^(?:true|false|null|yes|no|on|off|y|n|nan|inf)$/i.test(id);
  return isPlain ? id : quoted(id);
}

/** A JSON string is a YAML string, whatever it holds. */
function quoted(text: string): string {
  return JSON.stringify(text);
}

/** Nothing from outside may end a comment line. */
function plain(text: string): string {
  return text.replace(/[\u0000-\u001f\u007f-\u009f\u2028\u2029]/g, ' ');
}
