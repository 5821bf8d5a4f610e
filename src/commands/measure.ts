import { basename } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { deriveAmounts } from '../amount/deriveAmounts.js';
import type { Problem } from '../base/result.js';
import type { Method } from '../method/method.js';
import type { PointRecord } from '../point/pointRecord.js';
import { processTimePoint } from '../point/processTimePoint.js';
import { exitCodes } from './exitCodes.js';
import { measureText } from './measureText.js';
import { printProblem } from './printProblem.js';
import { loadMethod, readInput } from './readInput.js';

interface MeasureArguments {
  files: string[];
  method: string;
  json: boolean;
}

/** `measure <file...> --method M`: one shot, no record. */
export const measureCommand: CommandModule<object, MeasureArguments> = {
  command: 'measure <files...>',
  describe: 'Measures files at once and prints the result; writes no record',
  builder: (yargs) =>
    yargs
      .positional('files', { describe: 'JCAMP-DX files', type: 'string', array: true, demandOption: true })
      .option('method', { describe: 'method file (YAML)', type: 'string', demandOption: true, requiresArg: true })
      .option('json', { describe: 'print one JSON object for all files', type: 'boolean', default: false })
      .example(
        'kinetrail measure tp-000.jdx --method method.yaml',
        'shifts, areas, verdicts and conversion of one time point',
      ) as never,
  handler: async (args) => {
    process.exitCode = await measure(args);
  },
};

async function measure(args: ArgumentsCamelCase<MeasureArguments>): Promise<number> {
  const method = await loadMethod(args.method);
  if (!method.ok) return method.problem;
  let unread = 0;
  const results: object[] = [];
  for (const path of args.files) {
    const records = await measureFile(path, method.value);
    if (!records.ok) {
      unread += 1;
      printProblem(records.problem);
      results.push({
        file: path,
        status: 'set-aside',
        flags: [{ code: records.problem.code, message: records.problem.message }],
      });
      continue;
    }
    for (const record of records.value) {
      if (record.status === 'set-aside') unread += 1;
      const amounts = record.measurement ? deriveAmounts(record.measurement, method.value, {}) : undefined;
      results.push({ file: path, ...withoutDrawings(record), ...(amounts ? { amounts } : {}) });
      if (!args.json) process.stdout.write(measureText(path, record, amounts, process.stdout.columns ?? 100));
    }
  }
  if (args.json) process.stdout.write(`${JSON.stringify({ format: 'kinetrail.measure/1', results }, null, 2)}\n`);
  return unread > 0 ? exitCodes.someUnread : exitCodes.done;
}

async function measureFile(
  path: string,
  method: Method,
): Promise<{ ok: true; value: readonly PointRecord[] } | { ok: false; problem: Problem }> {
  const bytes = await readInput(path);
  return bytes.ok ? processTimePoint(bytes.value, basename(path), method) : bytes;
}

/** Strips and overview are for the report; on a terminal or in a pipe they are only bulk. */
function withoutDrawings(record: PointRecord): object {
  const { overview: _overview, measurement, ...rest } = record;
  if (!measurement) return rest;
  return { ...rest, measurement: { ...measurement, signals: measurement.signals.map(({ strip: _strip, ...signal }) => signal) } };
}
