import { resolve } from 'node:path';
import type { ArgumentsCamelCase, CommandModule } from 'yargs';
import { replaceFile } from '../record/durable.js';
import { realFilePort } from '../record/filePort.js';
import { outputProblem } from '../record/recordProblem.js';
import { readRunFacts } from '../record/runFacts.js';
import { renderReport } from '../report/renderReport.js';
import { readTemplates, shippedTemplates } from '../report/templateSet.js';
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
  const facts = await readRunFacts(folder);
  if (!facts.ok) {
    printProblem(facts.problem);
    return facts.problem.code === 'record-missing' ? exitCodes.usage : exitCodeOf(facts.problem);
  }
  const { html, pdf } = await renderReport(facts.value, pages.value);
  try {
    await replaceFile(realFilePort, folder, 'report.html', Buffer.from(html));
    await replaceFile(realFilePort, folder, 'report.pdf', pdf);
  } catch (cause) {
    const problem = outputProblem(cause, folder);
    printProblem(problem);
    return exitCodeOf(problem);
  }
  const { head } = facts.value;
  process.stdout.write(
    json
      ? `${JSON.stringify({ format: 'kinetrail.report/1', run: facts.value.run, files: ['report.html', 'report.pdf'], head })}\n`
      : `${escapeForTerminal(`${facts.value.run}: report.html and report.pdf written to ${folder}; ledger head ${head.seq} ${head.hash.slice(0, 12)}`)}\n`,
  );
  return exitCodes.done;
}
