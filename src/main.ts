import yargs from 'yargs';
import { programVersion } from './base/version.js';
import { exitCodes } from './commands/exitCodes.js';
import { printFault } from './commands/printProblem.js';
import { commandTable, findCommand } from './commands/table.js';
import { escapeForTerminal } from './commands/terminalText.js';

const summary = `kinetrail ${programVersion} - follows a chemical reaction overnight by NMR

  kinetrail demo                                          follow the sample runs and look at the reports
  kinetrail check method.yaml --at 60,400                 see the pattern that each signal should show
  kinetrail watch /share --method method.yaml --out /out  take in time points until stopped
  kinetrail report /out/BX-0417                           render the report again from the record

Commands:
${commandTable.map(({ name, does }) => `  ${name.padEnd(10)}${does}`).join('\n')}

kinetrail <command> --help explains each.
`;

/**
 * argv -> command -> exit code. Loads only the command that is asked for, so that the first sign of life is quick.
 *
 * @param argv arguments after the program's name
 * @returns the exit code of contract section 5
 */
export async function main(argv: readonly string[]): Promise<number> {
  const first = argv.find((word) => !word.startsWith('-'));
  if (first === undefined) return withoutCommand(argv);
  const entry = findCommand(first);
  if (!entry.ok) {
    process.stderr.write(
      `error: ${escapeForTerminal(entry.problem.message)}\n${entry.problem.hint ? `  ${entry.problem.hint}\n` : ''}`,
    );
    return exitCodes.usage;
  }
  try {
    const command = await entry.value.load();
    return await runCommand(command, argv);
  } catch (fault) {
    printFault(fault);
    return exitCodes.fault;
  }
}

function withoutCommand(argv: readonly string[]): number {
  if (argv.includes('--version')) {
    process.stdout.write(`${programVersion}\n`);
    return exitCodes.done;
  }
  const unknown = argv.find((word) => !['--help', '-h'].includes(word));
  if (unknown !== undefined) {
    process.stderr.write(`error: unknown option ${escapeForTerminal(unknown)}\n\n${summary}`);
    return exitCodes.usage;
  }
  process.stdout.write(summary);
  return exitCodes.done;
}

async function runCommand(command: import('yargs').CommandModule, argv: readonly string[]): Promise<number> {
  process.exitCode = exitCodes.done;
  const parser = yargs(argv as string[])
    .scriptName('kinetrail')
    .command(command)
    .strict()
    .version(programVersion)
    .help()
    .alias('help', 'h')
    .wrap(Math.min(100, process.stdout.columns ?? 100))
    .exitProcess(false)
    .showHelpOnFail(false)
    .fail((message, error) => {
      // Without a throw the command would run all the same, with what it needs missing.
      throw error ?? new UsageError(message);
    });
  try {
    await parser.parseAsync();
  } catch (cause) {
    if (!(cause instanceof UsageError)) throw cause;
    process.stderr.write(`error: ${escapeForTerminal(cause.message)}\n  kinetrail ${String(argv[0])} --help shows the usage.\n`);
    return exitCodes.usage;
  }
  return Number(process.exitCode ?? exitCodes.done);
}

/** Wrong usage, as told by the argument parser. */
class UsageError extends Error {
  override readonly name = 'UsageError';
}
