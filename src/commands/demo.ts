import { cp, mkdir, mkdtemp, readdir, rm, utimes } from 'node:fs/promises';
import { tmpdir } from 'node:os';
import { join, resolve } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { demoTable } from './demoTable.js';
import { exitCodes } from './exitCodes.js';
import { followOnce } from './followOnce.js';

interface DemoArguments {
  out: string;
}

/** The time point that arrives after the others were measured. */
const lateFile = join('PE-2207', 'tp-011.jdx');

/** `demo`: follows the sample runs shipped with the program and says where the reports are. */
export const demoCommand: CommandModule<object, DemoArguments> = {
  command: 'demo',
  describe: 'Follows the sample runs shipped with the program and says where the reports are',
  builder: (yargs) =>
    yargs
      .option('out', { describe: 'output folder', type: 'string', default: 'out', requiresArg: true })
      .example('kinetrail demo', 'three runs, two of them real') as never,
  handler: async (args) => {
    process.exitCode = await demo(args);
  },
};

/** A copy of the sample runs serves as the share, so that the late file can come late. */
async function demo(args: ArgumentsCamelCase<DemoArguments>): Promise<number> {
  const samples = resolve(import.meta.dirname, '..', '..', 'sample-runs');
  const out = resolve(args.out);
  await mkdir(out, { recursive: true });
  const folder = await mkdtemp(join(tmpdir(), 'kinetrail-demo-'));
  const share = join(folder, 'share');
  try {
    await cp(samples, share, { recursive: true, filter: (source) => !source.endsWith(lateFile) });
    await calm(share);
    process.stderr.write('following the sample runs: one pass, then a late file, then another pass\n');
    const first = await followOnce(share, out);
    if (first !== exitCodes.done && first !== exitCodes.someUnread) return first;
    await cp(join(samples, lateFile), join(share, lateFile));
    await calm(share);
    const second = await followOnce(share, out);
    if (second !== exitCodes.done && second !== exitCodes.someUnread) return second;
    process.stdout.write(await demoTable(out));
    // The half-written file of the sample night is part of the story, not a failure of the demo.
    return exitCodes.done;
  } finally {
    await rm(folder, { recursive: true, force: true });
  }
}

/** Sets every modification time to the same quiet moment in the past: the demo tells the same story every time. */
async function calm(share: string): Promise<void> {
  const quiet = new Date('2026-03-16T08:00:00Z');
  for (const entry of await readdir(share, { recursive: true, withFileTypes: true })) {
    if (entry.isFile()) await utimes(join(entry.parentPath, entry.name), quiet, quiet);
  }
}
