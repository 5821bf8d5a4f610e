/**
 * The watcher as a process of its own, with the real disk, clock, signals and reading process, and a cheap measurement:
 * what is tried here is the record, not the fit. Run by the fault tests: `node watchDriver.js '{"share": ..., "out": ...}'`.
 */
import { createHash } from 'node:crypto';
import { stopOnSignals } from '../../dist/commands/stopOnSignals.js';
import { exitCodeOf, onceExitCode } from '../../dist/commands/watchExit.js';
import { makeMeasurer } from '../../dist/record/measurer.js';
import { realContext } from '../../dist/record/recordContext.js';
import { verifyRun } from '../../dist/record/verifyRun.js';
import { renderSeriesCsv } from '../../dist/series/renderSeriesCsv.js';
import { renderSeriesJson } from '../../dist/series/renderSeriesJson.js';
import { forkShareReader } from '../../dist/watch/forkShareReader.js';
import { openWatch } from '../../dist/watch/openWatch.js';
import { makeRecordRenderer } from '../../dist/watch/recordRenderer.js';
import { watchOnce } from '../../dist/watch/watchOnce.js';
import { watchShare } from '../../dist/watch/watchShare.js';

const options = JSON.parse(process.argv[2]);
const sha256 = (bytes) => createHash('sha256').update(bytes).digest('hex');

async function measure({ bytes, methodText }) {
  if (options.measureMs) await new Promise((resolve) => setTimeout(resolve, options.measureMs));
  const text = Buffer.from(bytes).toString('utf8');
  const acquired = /##LONGDATE=(.*)/.exec(text)?.[1];
  const record = {
    format: 'kinetrail.point/1',
    program: '0.1.0',
    sha256: sha256(bytes),
    methodSha256: sha256(methodText),
    title: /##TITLE=(.*)/.exec(text)?.[1] ?? '',
    ...(acquired ? { acquired } : {}),
    acquiredSource: acquired ? 'long-date' : 'none',
    dataSha256: sha256(text.slice(text.indexOf('##XYDATA'))),
    kind: 'fid',
    nucleus: '1H',
    observeMhz: 400,
    status: 'accepted',
    flags: [],
    steps: [],
  };
  return { ok: true, value: [record] };
}

const context = realContext();
const measurer = makeMeasurer(measure);
const renderer = makeRecordRenderer(context.port, {
  seriesJson: renderSeriesJson,
  seriesCsv: renderSeriesCsv,
  report: async ({ head, createdUtc }) => ({ html: `<p>${head.seq} ${createdUtc}</p>`, pdf: Buffer.from(`%PDF ${head.hash}`) }),
});

async function verifyAll() {
  const verification = await verifyRun({
    port: context.port,
    folder: options.verify,
    measurer,
    renderer,
    program: '0.1.0',
    ...(options.share ? { share: options.share } : {}),
  });
  process.stdout.write(JSON.stringify(verification));
  return verification.checks.some(({ state }) => state === 'fail') ? 3 : 0;
}

async function watch() {
  const stop = stopOnSignals();
  const opened = await openWatch({
    context,
    settings: {
      share: options.share,
      outputFolder: options.out,
      settleMs: options.settleMs ?? 50,
      isOnce: options.once !== false,
      pollMs: options.pollMs ?? 50,
      longestWaitMs: options.once !== false ? 0 : 60_000,
      methodPath: options.method,
    },
    reader: forkShareReader(options.share),
    measurer,
    renderer,
    onEvent: ({ kind, run, file, message }) =>
      process.stderr.write(`${kind} ${run ?? ''}/${file ?? ''} ${message.split('\n')[0]}\n`),
    signal: stop.signal,
  });
  if (!opened.ok) {
    process.stderr.write(`${opened.problem.code}: ${opened.problem.message}\n`);
    return exitCodeOf(opened.problem);
  }
  try {
    if (options.once === false) {
      process.stderr.write('ready\n');
      await watchShare(opened.value.session);
      return stop.exitCode() ?? 0;
    }
    const summary = await watchOnce(opened.value.session);
    if (!summary.ok) return exitCodeOf(summary.problem);
    for (const problem of summary.value.problems) process.stderr.write(`${problem.code}: ${problem.message}\n`);
    return stop.exitCode() ?? onceExitCode(summary.value);
  } finally {
    await opened.value.close();
    stop.dispose();
  }
}

process.exitCode = options.verify ? await verifyAll() : await watch();
