import { deriveHighlights } from './deriveHighlights.js';
import { deriveTraces } from './deriveTraces.js';
import { formatTime } from './formatNumber.js';
import type { ReportInput } from './reportInput.js';
import type { ReportModel } from './reportModel.js';
import { cautionsSection } from './sections/cautionsSection.js';
import { changesSection } from './sections/changesSection.js';
import { conversionSection } from './sections/conversionSection.js';
import { methodSection } from './sections/methodSection.js';
import { pointsSection } from './sections/pointsSection.js';
import { puritySection } from './sections/puritySection.js';
import { signalsSection } from './sections/signalsSection.js';
import { verdictSentences } from './verdictSentences.js';

/**
 * Chooses every number and sentence of a report once, in the order in which a reviewer looks for them.
 *
 * @param input facts rebuilt from the record
 * @returns sections of plain blocks; HTML and PDF are drawn from it and cannot disagree
 */
export function deriveReportModel(input: ReportInput): ReportModel {
  const { series, runFile, head, createdUtc, program } = input;
  const batch = runFile.batch ?? series.run;
  const isFinal = series.states.some(({ state }) => state === 'final');
  const traces = deriveTraces(input);
  const reportId = `${series.run}-${head.seq}-${head.hash.slice(0, 8)}`;
  return {
    title: `${series.method.title}, batch ${batch}`,
    reportId,
    isFinal,
    createdUtc,
    program,
    batch,
    identity: [
      ['Batch', batch],
      ['Run', series.run],
      ['Method', `${series.method.title}, version ${series.method.version}`],
      ['Report', `${reportId}, ${isFinal ? 'final' : 'interim'}; supersedes every report of this run with a lower number`],
      ['Record created', formatTime(createdUtc)],
      ['Program', `kinetrail ${program}`],
      ...(runFile.notes !== undefined ? [['Notes', runFile.notes] as const] : []),
    ],
    highlights: deriveHighlights(input),
    verdict: verdictSentences(input),
    sections: [
      conversionSection(input),
      pointsSection(input),
      signalsSection(input),
      puritySection(input),
      methodSection(input),
      changesSection(input),
      cautionsSection(input),
    ],
    ...(traces !== undefined ? { traces } : {}),
  };
}
