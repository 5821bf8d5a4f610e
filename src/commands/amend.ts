import { resolve } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { realContext } from '../record/recordContext.js';
import { type AmendRequest, amendRun } from '../watch/amendRun.js';
import { makeMeasurePool } from '../watch/measurePool.js';
import { recordRenderer } from '../watch/recordRenderer.js';
import { exitCodes } from './exitCodes.js';
import { printProblem } from './printProblem.js';
import { readInput } from './readInput.js';
import { escapeForTerminal } from './terminalText.js';
import { exitCodeOf } from './watchExit.js';
import { eventLine } from './watchPrinter.js';

interface AmendArguments {
  run: string;
  point?: string;
  'set-aside': boolean;
  restore: boolean;
  comment: boolean;
  'use-method'?: string;
  'measure-again': boolean;
  'adopt-objects': boolean;
  by: string;
  because: string;
  json: boolean;
}

const measureTimeoutMs = 180_000;

/** `amend <DIR/run>`: adds a signed-off change; never erases. */
export const amendCommand: CommandModule<object, AmendArguments> = {
  command: 'amend <run>',
  describe: 'Adds a signed-off change to a record; never erases',
  builder: (yargs) =>
    yargs
      .positional('run', { describe: 'output folder of a run', type: 'string', demandOption: true })
      .option('point', {
        describe: 'file name, or first characters of its SHA-256; #2 for a block',
        type: 'string',
        requiresArg: true,
      })
      .option('set-aside', { describe: 'do not use this time point', type: 'boolean', default: false })
      .option('restore', {
        describe: 'use it again; for a replaced file: let this content stand',
        type: 'boolean',
        default: false,
      })
      .option('comment', { describe: 'only say something about it, or about the run', type: 'boolean', default: false })
      .option('use-method', { describe: 'measure every captured file again with this method', type: 'string', requiresArg: true })
      .option('measure-again', {
        describe: 'measure every captured file again with this program version',
        type: 'boolean',
        default: false,
      })
      .option('adopt-objects', {
        describe: 'begin a new ledger for stored files whose ledger is lost',
        type: 'boolean',
        default: false,
      })
      .option('by', { describe: 'who decides', type: 'string', demandOption: true, requiresArg: true })
      .option('because', { describe: 'why', type: 'string', demandOption: true, requiresArg: true })
      .option('json', { describe: 'print one JSON object', type: 'boolean', default: false })
      .example(
        'kinetrail amend /out/BX-0417 --point tp-007.jdx --set-aside --by QA-2 --because "tube was shaken"',
        'leave a point out',
      )
      .example(
        'kinetrail amend /out/BX-0417 --point tp-007.jdx --restore --by QA-2 --because "checked"',
        'take it back in',
      ) as never,
  handler: async (args) => {
    process.exitCode = await amend(args);
  },
};

async function amend(args: ArgumentsCamelCase<AmendArguments>): Promise<number> {
  const action = actionOf(args);
  if (action === undefined) {
    process.stderr.write(
      'error: give exactly one of --set-aside, --restore, --comment, --use-method, --measure-again, --adopt-objects\n',
    );
    return exitCodes.usage;
  }
  if ((action === 'set-aside' || action === 'restore') && args.point === undefined) {
    process.stderr.write(`error: --${action} needs --point\n  Give a file name or the first characters of its SHA-256.\n`);
    return exitCodes.usage;
  }
  const request = await requestOf(args, action);
  if (request === undefined) return exitCodes.usage;
  const context = realContext();
  const measurer = makeMeasurePool({ workers: 2, timeoutMs: measureTimeoutMs });
  const onEvent = (event: Parameters<typeof eventLine>[0]) => void process.stderr.write(`${eventLine(event)}\n`);
  const renderer = recordRenderer(context.port);
  try {
    const done = await amendRun(
      { context, measurer, renderer, renderedMs: new Map(), series: new Map(), onEvent },
      resolve(args.run),
      request,
    );
    if (!done.ok) {
      printProblem(done.problem);
      return exitCodeOf(done.problem);
    }
    const text = `recorded as entry ${done.value.seq}: ${action}${args.point !== undefined ? ` ${args.point}` : ''} by ${args.by}`;
    process.stdout.write(
      args.json
        ? `${JSON.stringify({ format: 'kinetrail.amend/1', seq: done.value.seq, action })}\n`
        : `${escapeForTerminal(text)}\n`,
    );
    return exitCodes.done;
  } finally {
    await measurer.close();
  }
}

function actionOf(args: ArgumentsCamelCase<AmendArguments>): AmendRequest['action'] | undefined {
  const given: AmendRequest['action'][] = [];
  if (args.setAside) given.push('set-aside');
  if (args.restore) given.push('restore');
  if (args.comment) given.push('comment');
  if (args.useMethod !== undefined) given.push('use-method');
  if (args.measureAgain) given.push('measure-again');
  if (args.adoptObjects) given.push('adopt-objects');
  return given.length === 1 ? given[0] : undefined;
}

async function requestOf(
  args: ArgumentsCamelCase<AmendArguments>,
  action: AmendRequest['action'],
): Promise<AmendRequest | undefined> {
  const common = { action, by: args.by, because: args.because, ...(args.point !== undefined ? { point: args.point } : {}) };
  if (args.useMethod === undefined) return common;
  const bytes = await readInput(args.useMethod);
  if (!bytes.ok) {
    printProblem(bytes.problem);
    return undefined;
  }
  return { ...common, method: { text: new TextDecoder().decode(bytes.value), file: resolve(args.useMethod) } };
}
