import { joinPath, pathText } from './bytePath.js';
import type { FilePort, Path } from './filePort.js';
import { dataHeadOf, ledgerName } from './ledger.js';
import { type LedgerLine, parseLedger } from './ledgerLine.js';
import type { Measurer } from './measurer.js';
import { outputProblem } from './recordProblem.js';
import type { Renderer } from './renderer.js';
import { readLedgerBytes } from './runRecord.js';
import { foldLedger } from './runState.js';
import { verifyDerived } from './verifyDerived.js';
import { verifyHead } from './verifyHead.js';
import { verifyNumbers } from './verifyNumbers.js';
import { verifyShare } from './verifyShare.js';
import { verifyStored } from './verifyStored.js';
import type { Check, Verification } from './verifyTypes.js';

export interface VerifyOptions {
  readonly port: FilePort;
  /** The run's output folder. */
  readonly folder: Path;
  readonly measurer: Measurer;
  readonly renderer: Renderer;
  readonly program: string;
  /** A head as a report prints it: a hash, or its first eight characters or more. */
  readonly head?: string;
  /** The share, or the run's folder on it. */
  readonly share?: string;
}

/**
 * Checks a run's record and repairs nothing: the chain, every stored file, every number computed again from the captured
 * bytes, the derived files, a printed head, the share.
 *
 * @returns every check with its outcome; a broken chain ends it, because nothing after it can be trusted
 */
export async function verifyRun(options: VerifyOptions): Promise<Verification> {
  const folder = pathText(options.folder);
  const chain = await verifyChain(options);
  if (chain.lines === undefined) return { run: folder, folder, checks: chain.checks };
  const { lines } = chain;
  const state = foldLedger(lines);
  const head = dataHeadOf(lines);
  const checks: Check[] = [...chain.checks];
  if (options.head !== undefined) checks.push(verifyHead(lines, options.head));
  checks.push(...(await verifyStored(options.port, options.folder, lines)));
  checks.push(...(await verifyNumbers(options, lines)));
  checks.push(...(await verifyDerived(options, lines)));
  if (options.share !== undefined) checks.push(...(await verifyShare(options.port, options.share, state)));
  return { run: state.run, folder, checks, head };
}

async function verifyChain({ port, folder }: VerifyOptions): Promise<{ checks: Check[]; lines?: readonly LedgerLine[] }> {
  const file = pathText(joinPath(folder, ledgerName));
  const failed = (message: string, seq?: number): { checks: Check[] } => ({
    checks: [{ name: 'chain', state: 'fail', message, file, ...(seq !== undefined ? { seq } : {}) }],
  });
  let bytes: Buffer | undefined;
  try {
    bytes = await readLedgerBytes(port, folder);
  } catch (cause) {
    return failed(outputProblem(cause, file).message);
  }
  if (bytes === undefined) return failed(`there is no ledger: ${file}`);
  const parsed = parseLedger(bytes, file);
  if (!parsed.ok) return failed(parsed.problem.message, parsed.problem.where?.line);
  const { lines, tornBytes } = parsed.value;
  if (lines.length === 0) return failed('the ledger holds no entry', 1);
  const first = lines[0]!.entry;
  if (first.kind !== 'opened' || first.format !== 'kinetrail.ledger/1')
    return failed('the ledger does not begin as one of this program', 1);
  const checks: Check[] = [{ name: 'chain', state: 'pass', message: `${lines.length} entries follow one another unbroken` }];
  if (tornBytes > 0) {
    const message = `an unfinished last line of ${tornBytes} bytes, never acknowledged, will be set aside at the next start`;
    checks.push({ name: 'chain', state: 'note', message });
  }
  return { checks, lines };
}
