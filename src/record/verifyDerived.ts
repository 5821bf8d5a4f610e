import { sha256 } from '../base/sha256.js';
import { joinPath } from './bytePath.js';
import { readWhole } from './durable.js';
import { dataHeadOf } from './ledger.js';
import type { LedgerLine } from './ledgerLine.js';
import { systemCode } from './recordProblem.js';
import { foldLedger } from './runState.js';
import type { VerifyOptions } from './verifyRun.js';
import type { Check } from './verifyTypes.js';

/**
 * Compares the derived files with the hashes recorded when they were written, and the series with what the record gives now.
 * A file that differs from its recorded hash but is what the record gives was written just before a stop.
 */
export async function verifyDerived(options: VerifyOptions, lines: readonly LedgerLine[]): Promise<Check[]> {
  const { rendered, method } = foldLedger(lines);
  if (method === undefined) return [];
  const present = await presentFiles(options, rendered !== undefined ? Object.keys(rendered.files) : derivedNames);
  const derived = await options.renderer.derive(options.folder, lines);
  if (!derived.ok)
    return [{ name: 'derived-files', state: 'fail', message: `the series cannot be derived: ${derived.problem.message}` }];
  const now = derived.value?.files ?? new Map<string, Uint8Array>();
  const isCurrent = rendered?.of === dataHeadOf(lines).seq;
  const isSameProgram = rendered?.program === options.program;
  const checks: Check[] = [];
  for (const [name, bytes] of present) {
    const check = judge(name, bytes, rendered?.files[name], now.get(name), isCurrent && isSameProgram);
    if (check !== undefined) checks.push(check);
  }
  if (rendered === undefined)
    checks.push({ name: 'derived-files', state: 'note', message: 'no derived files were recorded yet' });
  else if (!isCurrent)
    checks.push({
      name: 'derived-files',
      state: 'note',
      message: 'the derived files are older than the record; the next pass, or kinetrail report, brings them up to date',
    });
  if (checks.some(({ state }) => state === 'fail')) return checks;
  const count = [...present.values()].filter((bytes) => bytes !== undefined).length;
  return [{ name: 'derived-files', state: 'pass', message: `${count} derived files are as they were written` }, ...checks];
}

const derivedNames = ['series.json', 'series.csv', 'report.html', 'report.pdf'];

function judge(
  name: string,
  bytes: Buffer | undefined,
  recorded: string | undefined,
  now: Uint8Array | undefined,
  mustAgree: boolean,
): Check | undefined {
  const say = (state: Check['state'], message: string): Check => ({
    name: 'derived-files',
    state,
    message: `${name}: ${message}`,
    file: name,
  });
  if (bytes === undefined)
    return recorded === undefined ? undefined : say('note', 'it is missing; kinetrail report renders it again');
  const hash = sha256(bytes);
  const isNow = now !== undefined && sha256(now) === hash;
  if (hash === recorded) {
    const isNumbers = name.startsWith('series.');
    return mustAgree && isNumbers && now !== undefined && !isNow
      ? say('fail', 'the record gives other numbers than it holds')
      : undefined;
  }
  if (isNow) return say('note', 'it was written just before a stop and is what the record gives');
  return say(
    'fail',
    recorded === undefined
      ? 'the record does not know it'
      : 'it was changed after it was written: its hash is not the recorded one',
  );
}

async function presentFiles({ port, folder }: VerifyOptions, names: readonly string[]): Promise<Map<string, Buffer | undefined>> {
  const files = new Map<string, Buffer | undefined>();
  for (const name of names) {
    try {
      files.set(name, await readWhole(port, joinPath(folder, name)));
    } catch (cause) {
      if (systemCode(cause) === undefined) throw cause;
      files.set(name, undefined);
    }
  }
  return files;
}
