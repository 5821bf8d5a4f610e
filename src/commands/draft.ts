import { writeFile } from 'node:fs/promises';
import { basename } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { fail, ok, type Problem, type Result } from '../base/result.js';
import { checkMethod } from '../method/checkReport.js';
import { type DraftSource, draftSpecies } from '../method/draftMethod.js';
import { draftYaml } from '../method/draftYaml.js';
import { parseListing } from '../method/parseListing.js';
import { readMethod } from '../method/readMethod.js';
import { knownSolvents, solventName } from '../method/solvents.js';
import { joinSources, parseNamedSmiles } from './draftSources.js';
import { exitCodes } from './exitCodes.js';
import { printProblem } from './printProblem.js';
import { readInput } from './readInput.js';
import { escapeForTerminal } from './terminalText.js';

interface DraftArguments {
  smiles: string[];
  listed?: string;
  spectrum?: string;
  nucleus: string;
  solvent?: string;
  title?: string;
  out?: string;
}

/** `draft`: proposes a method file from what is at hand; every guess is marked. */
export const draftCommand: CommandModule<object, DraftArguments> = {
  command: 'draft',
  describe: 'Proposes a method from structures, listed data or a spectrum; every guess is marked as a comment',
  builder: (yargs) =>
    yargs
      .option('smiles', {
        describe: 'structure, then its name: "CCOC(C)=O ethyl acetate"; repeat it',
        type: 'string',
        array: true,
        default: [],
        requiresArg: true,
        nargs: 1,
      })
      .option('listed', {
        describe: 'text file with experimental sections, one paragraph a compound',
        type: 'string',
        requiresArg: true,
      })
      .option('spectrum', { describe: 'JCAMP-DX file whose multiplets are picked', type: 'string', requiresArg: true })
      .option('nucleus', { describe: 'observed nucleus', type: 'string', default: '1H', requiresArg: true })
      .option('solvent', { describe: 'deuterated solvent', type: 'string', requiresArg: true })
      .option('title', { describe: 'title of the method', type: 'string', requiresArg: true })
      .option('out', { describe: 'write to this file instead of standard output', type: 'string', requiresArg: true })
      .example(
        'kinetrail draft --smiles "OCc1ccccc1 benzyl alcohol" --smiles "CC(=O)OCc1ccccc1 benzyl acetate"',
        'a first proposal from structures alone',
      )
      .example(
        'kinetrail draft --listed experimental.txt --out method.yaml',
        'from the experimental section of a paper',
      ) as never,
  handler: async (args) => {
    process.exitCode = await draft(args);
  },
};

interface Drafted {
  readonly sources: readonly DraftSource[];
  readonly madeFrom: readonly string[];
  readonly solvent?: string;
}

async function draft(args: ArgumentsCamelCase<DraftArguments>): Promise<number> {
  const gathered = await gather(args);
  if (!gathered.ok) return refused(gathered.problem);
  const { sources, madeFrom, solvent } = gathered.value;
  const species = draftSpecies(sources, args.nucleus);
  if (!species.ok) return refused(species.problem);
  const title = args.title ?? `Draft for ${species.value.map(({ name }) => name).join(', ')}`.slice(0, 200);
  const text = draftYaml(
    { title, nucleus: args.nucleus, madeFrom, ...(solvent !== undefined ? { solvent } : {}) },
    species.value,
  );
  if (!reportOwnCheck(text)) return exitCodes.usage;
  return write(text, args.out);
}

async function gather(args: ArgumentsCamelCase<DraftArguments>): Promise<Result<Drafted>> {
  if (args.smiles.length === 0 && args.listed === undefined && args.spectrum === undefined)
    return fail(usage('draft-nothing', 'nothing to draft from; give --smiles, --listed or --spectrum'));
  if (!/^\d{1,3}[A-Z][a-z]?$/.test(args.nucleus))
    return fail(usage('nucleus-unknown', `--nucleus ${args.nucleus}: expected a form such as 1H or 19F`));
  const asked = args.solvent === undefined ? undefined : solventName(args.solvent);
  if (args.solvent !== undefined && asked === undefined)
    return fail(usage('solvent-unknown', `--solvent ${args.solvent}: expected one of ${knownSolvents().join(', ')}`));
  const structures: DraftSource[] = args.smiles.map(parseNamedSmiles);
  const madeFrom = structures.length > 0 ? [`${structures.length} structure${structures.length === 1 ? '' : 's'}`] : [];
  let listed: DraftSource[] = [];
  let solvent = asked;
  if (args.listed !== undefined) {
    const bytes = await readInput(args.listed);
    if (!bytes.ok) return bytes;
    const listing = parseListing(new TextDecoder().decode(bytes.value), args.nucleus);
    if (!listing.ok) return fail({ ...listing.problem, where: { file: args.listed } });
    listed = listing.value.map(({ name, signals }) => ({ name, listed: signals }));
    solvent ??= listing.value.find((one) => one.solvent !== undefined)?.solvent;
    madeFrom.push(`listed data (${basename(args.listed)})`);
  }
  if (args.spectrum !== undefined) {
    const { draftFromSpectrum } = await import('./draftFromSpectrum.js');
    const picked = await draftFromSpectrum(args.spectrum, args.nucleus, solvent);
    if (!picked.ok) return picked;
    listed.push(picked.value.source);
    madeFrom.push(`the multiplets of ${basename(args.spectrum)}; guess: all belong to one compound, counts of nuclei by area`);
    for (const doubt of picked.value.doubts) {
      madeFrom.push(`that file with a doubt: ${doubt}`);
      process.stderr.write(`look: ${escapeForTerminal(doubt)}\n`);
    }
  }
  return ok({ sources: joinSources(structures, listed), madeFrom, ...(solvent !== undefined ? { solvent } : {}) });
}

/** A proposal must be a valid method; what contradicts its structures is told, because only a chemist can mend it. */
function reportOwnCheck(text: string): boolean {
  const method = readMethod(text, 'draft');
  if (!method.ok) {
    for (const problem of method.problem) printProblem(problem);
    return false;
  }
  const report = checkMethod(method.value, [400]);
  for (const problem of report.problems) printProblem(problem);
  for (const flag of report.flags) {
    if (flag.weight !== 'note')
      process.stderr.write(`look: ${escapeForTerminal(flag.signal ?? '')}: ${escapeForTerminal(flag.message)}\n`);
  }
  return report.problems.length === 0;
}

async function write(text: string, path: string | undefined): Promise<number> {
  if (path === undefined) {
    process.stdout.write(text);
    return exitCodes.done;
  }
  try {
    // An existing file is somebody's work: it is never replaced.
    await writeFile(path, text, { flag: 'wx' });
  } catch (cause) {
    const isThere = (cause as NodeJS.ErrnoException).code === 'EEXIST';
    const reason = isThere
      ? 'it exists already, and a draft replaces nothing'
      : `it cannot be written (${(cause as NodeJS.ErrnoException).code})`;
    return refused(usage('draft-unwritable', `${path}: ${reason}`));
  }
  process.stderr.write(`wrote ${escapeForTerminal(path)}; next: kinetrail check ${escapeForTerminal(path)}\n`);
  return exitCodes.done;
}

function usage(code: string, message: string): Problem {
  return { code, area: 'usage', message, retry: 'never' };
}

function refused(problem: Problem): number {
  printProblem(problem);
  return exitCodes.usage;
}
