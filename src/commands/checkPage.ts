import { readFileSync } from 'node:fs';
import { Eta } from 'eta';
import { programVersion } from '../base/version.js';
import type { CheckedSignal, CheckedSpecies, CheckReport, SignalAtField } from '../method/checkReport.js';
import { basisWords, fieldWords, structureWords } from './checkWords.js';
import { patternDrawing } from './patternDrawing.js';
import { plainNumber } from './plainNumber.js';

const tablePeaksMax = 60;

/**
 * The page of a check: the same words as on the terminal, with every pattern drawn. One file, no scripts, nothing from outside.
 *
 * @param report  of `checkMethod`
 * @returns HTML; the same report gives the same bytes
 */
export function checkPage(report: CheckReport): string {
  const template = (name: string) => readFileSync(new URL(`../../templates/${name}`, import.meta.url), 'utf8');
  const { title, version, nucleus, solvent, fieldsMhz, widthHz, sha256, collisions, flags, problems } = report;
  const facts = `Version ${version}; ${nucleus}${solvent === undefined ? '' : ` in ${solvent}`}; ${fieldsMhz.join(', ')} MHz; lines drawn ${widthHz} Hz wide.`;
  const messageOf = ({ signal, message }: CheckReport['flags'][number]) =>
    signal === undefined ? message : `${signal}: ${message}`;
  const contradictions = [
    ...problems.map(({ message }) => message),
    ...flags.filter(({ weight }) => weight !== 'note').map(messageOf),
  ];
  const remarks = flags.filter(({ weight }) => weight === 'note').map(messageOf);
  const sections = [
    { head: 'Contradictions', entries: contradictions, otherwise: 'None.' },
    { head: 'Collisions between species', entries: collisions.map(({ message }) => message), otherwise: 'None at these fields.' },
    ...(remarks.length > 0 ? [{ head: 'Remarks', entries: remarks, otherwise: '' }] : []),
  ];
  const view = {
    title,
    facts,
    css: template('check.css'),
    sections,
    species: report.species.map((species) => speciesView(species, widthHz)),
    sha256,
    program: programVersion,
  };
  return new Eta({ autoEscape: true }).renderString(template('check.html'), view);
}

function speciesView(species: CheckedSpecies, widthHz: number) {
  const facts = [species.name, species.role, species.smiles, species.formula].filter((fact) => fact !== undefined);
  const mass = species.molarMass === undefined ? [] : [`${plainNumber(species.molarMass, 3)} g/mol`];
  return {
    id: species.id,
    facts: [...facts, ...mass].join(', '),
    unlisted: species.unlisted
      .map(({ label, nuclei, expected }) => `${label} (${expected}, ${nuclei} ${nuclei === 1 ? 'nucleus' : 'nuclei'})`)
      .join(', '),
    signals: species.signals.map((signal) => signalView(signal, widthHz)),
  };
}

function signalView(signal: CheckedSignal, widthHz: number) {
  return {
    key: signal.key,
    listed: signal.listed,
    structure: structureWords(signal) ?? '',
    basis: basisWords(signal),
    fields: signal.atFields.filter(({ lines }) => lines.length > 0).map((field) => fieldView(signal.key, field, widthHz)),
  };
}

function fieldView(key: string, field: SignalAtField, widthHz: number) {
  const words = `${field.observeMhz} MHz: ${fieldWords(field)}`;
  return {
    mhz: String(field.observeMhz),
    words,
    drawing: patternDrawing(field.lines, widthHz, escapeHtml(`${key} at ${words}`)),
    rows: field.peaks.slice(0, tablePeaksMax).map(({ offsetHz, height }) => [plainNumber(offsetHz, 2), plainNumber(height, 3)]),
  };
}

function escapeHtml(text: string): string {
  return text.replace(/[&<>"']/g, (letter) => `&#${letter.charCodeAt(0)};`);
}
