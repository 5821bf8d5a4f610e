import { resolve } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { realContext } from '../record/recordContext.js';
import { type DoctorQuestion, examine, type Finding } from '../watch/examine.js';
import { exitCodes } from './exitCodes.js';
import { escapeForTerminal } from './terminalText.js';

interface DoctorArguments {
  share?: string;
  out?: string;
  method?: string;
  site?: string;
  json: boolean;
}

/** `doctor`: reads only; a line for each thing looked at, and what to do when it is not well. */
export const doctorCommand: CommandModule<object, DoctorArguments> = {
  command: 'doctor [share]',
  describe: 'Checks share, output folder, clock, fonts and versions; changes nothing',
  builder: (yargs) =>
    yargs
      .positional('share', { describe: 'the share that is to be watched', type: 'string' })
      .option('out', { describe: 'the output folder', type: 'string', requiresArg: true })
      .option('method', { describe: 'the default method', type: 'string', requiresArg: true })
      .option('site', { describe: 'site file', type: 'string', requiresArg: true })
      .option('json', { describe: 'print one JSON object', type: 'boolean', default: false })
      .example('kinetrail doctor', 'this computer and this program')
      .example('kinetrail doctor /share --out /out --method method.yaml', 'everything that a night needs') as never,
  handler: async (args) => {
    process.exitCode = await doctor(args);
  },
};

async function doctor(args: ArgumentsCamelCase<DoctorArguments>): Promise<number> {
  const absolute = (path: string | undefined) => (path !== undefined ? resolve(path) : undefined);
  const given = {
    share: absolute(args.share),
    out: absolute(args.out),
    method: absolute(args.method),
    site: absolute(args.site),
  };
  const question = Object.fromEntries(Object.entries(given).filter(([, path]) => path !== undefined)) as DoctorQuestion;
  const findings = await examine(realContext(), question);
  const worst = findings.some(({ state }) => state === 'fail');
  process.stdout.write(
    args.json ? `${JSON.stringify({ format: 'kinetrail.doctor/1', findings }, null, 2)}\n` : findingsText(findings),
  );
  return worst ? exitCodes.fault : exitCodes.done;
}

function findingsText(findings: readonly Finding[]): string {
  return findings.map((finding) => `${findingText(finding)}\n`).join('');
}

function findingText({ state, name, message, fix }: Finding): string {
  const head = `${state.padEnd(4)}  ${name.padEnd(14)}  ${escapeForTerminal(message)}`;
  return fix !== undefined ? `${head}\n${' '.repeat(22)}${escapeForTerminal(fix)}` : head;
}
