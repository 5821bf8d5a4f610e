import type { CheckedSignal, CheckedSpecies, CheckReport } from '../method/checkReport.js';
import { basisWords, fieldWords, structureWords } from './checkWords.js';
import { plainNumber } from './plainNumber.js';
import { escapeForTerminal } from './terminalText.js';

/** The terminal form of a check: species with their signals, collisions, contradictions, remarks. */
export function checkText(report: CheckReport): string {
  const { title, version, nucleus, solvent, widthHz } = report;
  const lines = [
    `${title}, version ${version}: ${nucleus}${solvent === undefined ? '' : ` in ${solvent}`}, lines drawn ${widthHz} Hz wide`,
    ...report.species.flatMap((species) => ['', ...speciesLines(species)]),
    '',
    ...section(
      'collisions between species',
      report.collisions.map(({ message }) => message),
      `none at ${report.fieldsMhz.join(', ')} MHz`,
    ),
    ...section('contradictions', report.flags.filter(({ weight }) => weight !== 'note').map(flagText), 'none'),
    ...section('remarks', report.flags.filter(({ weight }) => weight === 'note').map(flagText)),
  ];
  return `${lines.map(escapeForTerminal).join('\n')}\n`;
}

function speciesLines(species: CheckedSpecies): string[] {
  const facts = [species.name, species.role, species.smiles, species.formula].filter((fact) => fact !== undefined);
  const mass = species.molarMass === undefined ? [] : [`${plainNumber(species.molarMass, 3)} g/mol`];
  const unlisted = species.unlisted.map(
    ({ label, nuclei, expected }) => `${label} (${expected}, ${nuclei} ${nuclei === 1 ? 'nucleus' : 'nuclei'})`,
  );
  return [
    `${species.id}: ${[...facts, ...mass].join(', ')}`,
    ...species.signals.flatMap(signalLines),
    ...(unlisted.length > 0 ? [`  not listed: ${unlisted.join(', ')}`] : []),
  ];
}

function signalLines(signal: CheckedSignal): string[] {
  const structure = structureWords(signal);
  const use = signal.use === 'quantify' ? '' : `  (${signal.use})`;
  return [
    `  ${signal.key}  ${signal.listed}${use}`,
    ...(structure === undefined ? [] : [`    structure   ${structure}`]),
    `    computed    ${basisWords(signal)}`,
    ...signal.atFields.map((field) => `    ${`${field.observeMhz} MHz`.padEnd(11)} ${fieldWords(field)}`),
  ];
}

function flagText({ code, signal, message }: CheckReport['flags'][number]): string {
  return `${signal === undefined ? '' : `${signal}: `}${message}   (${code})`;
}

function section(head: string, entries: readonly string[], otherwise?: string): string[] {
  if (entries.length === 0) return otherwise === undefined ? [] : [`${head}: ${otherwise}`];
  return [`${head}:`, ...entries.map((entry) => `  ${entry}`)];
}
