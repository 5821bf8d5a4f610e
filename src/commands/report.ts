import { resolve } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { realContext } from '../record/recordContext.js';
import { readRunFacts } from '../record/runFacts.js';
import { renderReport } from '../report/renderReport.js';
import { readTemplates, shippedTemplates } from '../report/templateSet.js';
import { renderSeriesCsv } from '../series/renderSeriesCsv.js';
import { renderSeriesJson } from '../series/renderSeriesJson.js';
import { renderAgain } from '../watch/amendRun.js';
import { makeRecordRenderer } from '../watch/recordRenderer.js';
import { exitCodes } from './exitCodes.js';
import { printProblem } from './printProblem.js';
import { escapeForTerminal } from './terminalText.js';
import { exitCodeOf } from './watchExit.js';

interface ReportArguments {
  run: string;
  templates?: string;
  json: boolean;
}

/** `report <DIR/run>`: renders the report again from the record alone. */
export const reportCommand: CommandModule<object, ReportArguments> = {
  command: 'report <run>',
  describe: 'Renders report.html and report.pdf again from the record alone',
  builder: (yargs) =>
    yargs
      .positional('run', { describe: 'output folder of a run', type: 'string', demandOption: true })
      .option('templates', {
        describe: 'folder with pages of your own: report.html, report.css',
        type: 'string',
        requiresArg: true,
      })
      .option('json', { describe: 'print one JSON object', type: 'boolean', default: false })
      .example('kinetrail report /out/BX-0417', 'the same record gives the same bytes') as never,
  handler: async (args) => {
    process.exitCode = await report(args);
  },
};

async function report({ run, templates, json }: ArgumentsCamelCase<ReportArguments>): Promise<number> {
  const folder = resolve(run);
  const pages = templates !== undefined ? readTemplates(resolve(templates)) : { ok: true as const, value: shippedTemplates() };
  if (!pages.ok) {
    printProblem(pages.problem);
    return exitCodes.usage;
  }
  const context = realContext();
  const renderer = makeRecordRenderer(context.port, {
    seriesJson: renderSeriesJson,
    seriesCsv: renderSeriesCsv,
    report: (facts) => renderReport(facts, pages.value),
  });
  // Through the record: what is written is noted there with its hash, or `verify` could not tell it from a forgery.
  const rendered = await renderAgain({ context, renderer, renderedMs: new Map(), series: new Map() }, folder);
  const facts = rendered.ok ? await readRunFacts(folder) : rendered;
  if (!facts.ok) {
    printProblem(facts.problem);
    return exitCodeOf(facts.problem);
  }
  const { head } = facts.value;
  process.stdout.write(
    json
      ? `${JSON.stringify({ format: 'kinetrail.report/1', run: facts.value.run, files: ['report.html', 'report.pdf'], head })}\n`
      : `${escapeForTerminal(`${facts.value.run}: report.html and report.pdf written to ${folder}; ledger head ${head.seq} ${head.hash.slice(0, 12)}`)}\n`,
  );
  return exitCodes.done;
}
