import { join, resolve } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { programVersion } from '../base/version.js';
import { nameText } from '../record/bytePath.js';
import { realFilePort } from '../record/filePort.js';
import { verifyRun } from '../record/verifyRun.js';
import { hasFailed, type Verification } from '../record/verifyTypes.js';
import { makeMeasurePool } from '../watch/measurePool.js';
import { recordedRuns } from '../watch/recordedRuns.js';
import { recordRenderer } from '../watch/recordRenderer.js';
import { exitCodes } from './exitCodes.js';
import { escapeForTerminal } from './terminalText.js';

interface VerifyArguments {
  run: string;
  head?: string;
  share?: string;
  json: boolean;
}

const measureTimeoutMs = 180_000;
const workers = 2;

/** `verify <DIR/run>`: checks a record; repairs nothing. */
export const verifyCommand: CommandModule<object, VerifyArguments> = {
  command: 'verify <run>',
  describe: 'Checks a record and recomputes each number from the captured raw files; repairs nothing',
  builder: (yargs) =>
    yargs
      .positional('run', { describe: 'output folder of a run (or of all runs)', type: 'string', demandOption: true })
      .option('head', { describe: 'ledger head as printed on a report', type: 'string', requiresArg: true })
      .option('share', { describe: 'share, or the run folder on it, to compare with', type: 'string', requiresArg: true })
      .option('json', { describe: 'print one JSON object', type: 'boolean', default: false })
      .example('kinetrail verify /out/BX-0417', 'chain, stored files, every number, derived files')
      .example('kinetrail verify /out/BX-0417 --head 20b613f4dbe1', 'is this the record that the printed report shows?') as never,
  handler: async (args) => {
    process.exitCode = await verify(args);
  },
};

async function verify({ run, head, share, json }: ArgumentsCamelCase<VerifyArguments>): Promise<number> {
  const folder = resolve(run);
  const runs = (await recordedRuns(realFilePort, folder)).map((names) => join(folder, ...names.map(nameText)));
  const isOne = runs.includes(folder);
  const targets = isOne || runs.length === 0 ? [folder] : runs;
  if (runs.length === 0 && !(await isFolder(folder))) {
    process.stderr.write(`error: ${escapeForTerminal(folder)}: no such folder   (code: record-missing)\n`);
    return exitCodes.usage;
  }
  const measurer = makeMeasurePool({ workers, timeoutMs: measureTimeoutMs });
  const renderer = recordRenderer(realFilePort);
  const verifications: Verification[] = [];
  try {
    for (const target of targets) {
      const more = { ...(head !== undefined ? { head } : {}), ...(share !== undefined ? { share: resolve(share) } : {}) };
      const verification = await verifyRun({
        port: realFilePort,
        folder: target,
        measurer,
        renderer,
        program: programVersion,
        ...more,
      });
      verifications.push(verification);
      if (!json) process.stdout.write(verificationText(verification));
    }
  } finally {
    await measurer.close();
  }
  if (json) process.stdout.write(`${JSON.stringify({ format: 'kinetrail.verify/1', runs: verifications }, null, 2)}\n`);
  for (const verification of verifications) printVerdict(verification);
  return verifications.some(hasFailed) ? exitCodes.damaged : exitCodes.done;
}

async function isFolder(path: string): Promise<boolean> {
  return realFilePort.statThrough(path).then(
    ({ kind }) => kind === 'folder',
    () => false,
  );
}

/** The first failure in words; the whole list is on stdout. */
function printVerdict({ checks, folder }: Verification): void {
  const failed = checks.filter(({ state }) => state === 'fail');
  const first = failed[0];
  if (first === undefined) return;
  const more = failed.length > 1 ? ` (and ${failed.length - 1} more)` : '';
  process.stderr.write(`error: ${escapeForTerminal(`${folder}: ${first.message}${more}`)}   (code: verification-failed)\n`);
}

const words = { pass: 'pass', note: 'note', fail: 'FAIL' } as const;

function verificationText(verification: Verification): string {
  const { run, checks, head } = verification;
  const lines = checks.map(({ state, name, message }) => `  ${words[state]}  ${name.padEnd(13)}  ${escapeForTerminal(message)}`);
  const verdict = hasFailed(verification) ? 'verification failed' : 'verified';
  const at = head !== undefined ? `; ledger head ${head.seq} ${head.hash}` : '';
  return `${escapeForTerminal(run)}: ${verdict}${at}\n${lines.join('\n')}\n`;
}
