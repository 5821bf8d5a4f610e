import { writeFile } from 'node:fs/promises';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { checkMethod } from '../method/checkReport.js';
import { checkPage } from './checkPage.js';
import { checkText } from './checkText.js';
import { exitCodes } from './exitCodes.js';
import { printProblem } from './printProblem.js';
import { loadMethod } from './readInput.js';
import { escapeForTerminal } from './terminalText.js';
import { tubeBackground } from './tubeBackground.js';

interface CheckArguments {
  method: string;
  at: string;
  width: number;
  json: boolean;
  html?: string;
}

const fieldsMax = 8;
const fieldMhzRange: readonly [number, number] = [1, 2000];

/** `check <method>`: validates a method and shows the pattern of each signal at the fields asked for. */
export const checkCommand: CommandModule<object, CheckArguments> = {
  command: 'check <method>',
  describe: 'Validates a method and prints the pattern each signal should show, at the fields asked for',
  builder: (yargs) =>
    yargs
      .positional('method', { describe: 'method file (YAML)', type: 'string', demandOption: true })
      .option('at', {
        describe: 'observe frequencies, MHz, separated by commas',
        type: 'string',
        default: '60,400',
        requiresArg: true,
      })
      .option('width', { describe: 'full line width at half height, Hz', type: 'number', default: 1, requiresArg: true })
      .option('json', { describe: 'print one JSON object', type: 'boolean', default: false })
      .option('html', { describe: 'write a page with the drawn patterns to this file', type: 'string', requiresArg: true })
      .example('kinetrail check method.yaml --at 60,400', 'patterns and collisions on a bench instrument and on a magnet')
      .example('kinetrail check method.yaml --html check.html', 'the same with drawings, for the method file') as never,
  handler: async (args) => {
    process.exitCode = await check(args);
  },
};

async function check(args: ArgumentsCamelCase<CheckArguments>): Promise<number> {
  const fields = parseFields(args.at);
  if (fields === undefined) {
    const given = escapeForTerminal(args.at.slice(0, 60));
    process.stderr.write(`error: --at ${given}: up to ${fieldsMax} frequencies in MHz are expected, such as --at 60,400\n`);
    return exitCodes.usage;
  }
  if (!(args.width > 0 && args.width <= 100)) {
    process.stderr.write('error: --width must be a line width in Hz, above 0 and up to 100\n');
    return exitCodes.usage;
  }
  const method = await loadMethod(args.method);
  if (!method.ok) return method.problem;
  const background = tubeBackground(method.value.nucleus, method.value.solvent);
  const report = checkMethod(method.value, fields, args.width, background);
  for (const problem of report.problems) printProblem({ ...problem, where: { ...problem.where, file: args.method } });
  if (args.html !== undefined) {
    const written = await writePage(args.html, checkPage(report));
    if (!written) return exitCodes.usage;
  }
  // A factor without bound has no number in JSON: it is absent there.
  const finite = (_: string, value: unknown) => (typeof value === 'number' && !Number.isFinite(value) ? undefined : value);
  process.stdout.write(
    args.json ? `${JSON.stringify({ format: 'kinetrail.check/1', ...report }, finite, 2)}\n` : checkText(report),
  );
  const isContradicted = report.problems.length > 0 || report.flags.some(({ weight }) => weight !== 'note');
  return isContradicted ? exitCodes.usage : exitCodes.done;
}

function parseFields(text: string): number[] | undefined {
  const fields = text.split(',').map((part) => Number(part.trim() === '' ? Number.NaN : part));
  const isGood = fields.every((field) => field >= fieldMhzRange[0] && field <= fieldMhzRange[1]);
  return isGood && fields.length <= fieldsMax ? [...new Set(fields)] : undefined;
}

async function writePage(path: string, page: string): Promise<boolean> {
  try {
    await writeFile(path, page);
    process.stderr.write(`wrote ${escapeForTerminal(path)}\n`);
    return true;
  } catch (cause) {
    const code = (cause as NodeJS.ErrnoException).code ?? 'unknown reason';
    printProblem({
      code: 'page-unwritable',
      area: 'usage',
      message: `${path}: the page cannot be written (${code})`,
      hint: 'Name a file in a folder that exists and may be written to.',
      retry: 'never',
      cause,
    });
    return false;
  }
}
