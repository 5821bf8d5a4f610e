import { canonicalJson } from '../base/canonicalJson.js';
import { sha256 } from '../base/sha256.js';
import { compareRecords } from './compareRecords.js';
import type { LedgerLine } from './ledgerLine.js';
import type { MeasureOutcome } from './measurer.js';
import { getPoint, getRaw } from './objectStore.js';
import { foldLedger, resultKey, type StampedInput } from './runState.js';
import type { VerifyOptions } from './verifyRun.js';
import type { Check } from './verifyTypes.js';

/** Relative difference up to which numbers of another program version count as the same. */
export const toleranceRelative = 1e-4;

/**
 * Measures every captured file again, with the method that the record names, and compares with the stored point records: bit
 * for bit when the same program version measured them, else within `toleranceRelative`, and says so.
 */
export async function verifyNumbers(options: VerifyOptions, lines: readonly LedgerLine[]): Promise<Check[]> {
  const results = resultsOf(lines);
  const methods = new Map(lines.flatMap(({ entry }) => (entry.kind === 'method' ? [[entry.sha256, entry.file] as const] : [])));
  const checks: Check[] = [];
  let samePoints = 0;
  let nearPoints = 0;
  const engines = new Set<string>();
  const waiting = [...results];
  const turn = async (): Promise<void> => {
    for (let input = waiting.shift(); input !== undefined; input = waiting.shift()) {
      const outcome = await verifyOne(options, input, methods.get(input.methodSha256!) ?? 'method');
      samePoints += outcome.same;
      nearPoints += outcome.near;
      if (outcome.near > 0) engines.add(input.engine ?? 'unknown');
      checks.push(...outcome.checks);
    }
  };
  await Promise.all(Array.from({ length: options.measurer.atOnce }, turn));
  checks.sort((a, b) => (a.seq ?? 0) - (b.seq ?? 0));
  if (nearPoints > 0) {
    const message = `${nearPoints} time points measured by program ${[...engines].sort().join(', ')} agree within ${toleranceRelative} (relative) with this program, ${options.program}`;
    checks.unshift({ name: 'recomputation', state: 'pass', message });
  }
  if (samePoints > 0 || checks.length === 0) {
    checks.unshift({
      name: 'recomputation',
      state: 'pass',
      message: `${samePoints} time points computed again from the captured files: the same bits`,
    });
  }
  return checks;
}

/** The last result of each content under each method. */
function resultsOf(lines: readonly LedgerLine[]): StampedInput[] {
  const seen = new Map<string, StampedInput>();
  for (const input of foldLedger(lines).results.values()) seen.set(resultKey(input.sha256!, input.methodSha256!), input);
  return [...seen.values()].sort((a, b) => a.seq - b.seq);
}

interface Outcome {
  readonly same: number;
  readonly near: number;
  readonly checks: readonly Check[];
}

async function verifyOne(options: VerifyOptions, input: StampedInput, methodFile: string): Promise<Outcome> {
  const { port, folder, measurer } = options;
  const say = (state: Check['state'], message: string): Outcome => ({
    same: 0,
    near: 0,
    checks: [
      {
        name: 'recomputation',
        state,
        message: `entry ${input.seq}, ${input.file}: ${message}`,
        seq: input.seq,
        file: input.file,
      },
    ],
  });
  const bytes = await getRaw(port, folder, input.sha256!);
  const methodText = await getRaw(port, folder, input.methodSha256!);
  // Missing or damaged files are told of by the check of the stored files.
  if (!bytes.ok || !methodText.ok) return say('fail', 'it cannot be computed again: a stored file is missing or damaged');
  const outcome = await measurer.measure({
    bytes: bytes.value,
    fileName: input.file,
    methodText: methodText.value.toString('utf8'),
    methodFile,
  });
  if (outcome.kind === 'died' || outcome.kind === 'fault') return say('note', `computing it again failed: ${outcome.message}`);
  return input.state === 'measured' ? compareMeasured(options, input, outcome, say) : compareRefused(input, outcome, say);
}

type Say = (state: Check['state'], message: string) => Outcome;

function compareRefused(input: StampedInput, outcome: MeasureOutcome, say: Say): Outcome {
  const code = input.flags?.[0]?.code;
  if (code === 'program-fault' || code === 'measuring-died')
    return say('note', 'it was set aside after a fault of the program; it is not compared');
  if (outcome.kind === 'refused' && outcome.problem.code === code) return { same: 0, near: 0, checks: [] };
  return say(
    'fail',
    `it was set aside (${code}), but computing it again gives ${outcome.kind === 'refused' ? outcome.problem.code : 'a result'}`,
  );
}

async function compareMeasured(options: VerifyOptions, input: StampedInput, outcome: MeasureOutcome, say: Say): Promise<Outcome> {
  if (outcome.kind !== 'measured') return say('fail', 'it was measured, but computing it again refuses it');
  const hashes = outcome.records.map((record) => sha256(canonicalJson(record)));
  const stored = input.points ?? [];
  if (hashes.length === stored.length && hashes.every((hash, index) => hash === stored[index]))
    return { same: stored.length, near: 0, checks: [] };
  const isSameProgram = input.engine === options.program;
  if (hashes.length !== stored.length)
    return say('fail', `${stored.length} time points are recorded, ${hashes.length} are computed again`);
  for (const [index, record] of outcome.records.entries()) {
    const before = await getPoint(options.port, options.folder, stored[index]!);
    if (!before.ok) return say('fail', 'its point record is missing or damaged');
    const difference = compareRecords(before.value, record, isSameProgram ? 0 : toleranceRelative);
    if (difference !== undefined)
      return say(
        'fail',
        `computed again it differs at ${difference.path}: recorded ${difference.before}, now ${difference.after}`,
      );
  }
  return isSameProgram ? say('fail', 'computed again it differs') : { same: 0, near: stored.length, checks: [] };
}
