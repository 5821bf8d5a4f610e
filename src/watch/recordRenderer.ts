import { fail, ok, type Problem, type Result } from '../base/result.js';
import { deriveRunSeries } from '../record/deriveRunSeries.js';
import type { FilePort } from '../record/filePort.js';
import type { Derived, Renderer, RunOnIndex } from '../record/renderer.js';
import { type DeriveSeries, factsOf, type RunFacts } from '../record/runFacts.js';
import { foldLedger } from '../record/runState.js';
import { renderReport } from '../report/renderReport.js';
import { renderSeriesCsv } from '../series/renderSeriesCsv.js';
import { renderSeriesJson } from '../series/renderSeriesJson.js';
import type { Series } from '../series/series.js';

/** The functions that turn facts into bytes. */
export interface RenderParts {
  readonly seriesJson: (series: Series) => string;
  readonly seriesCsv: (series: Series, method: RunFacts['method']) => string;
  readonly report?: (facts: RunFacts) => Promise<{ readonly html: string; readonly pdf: Uint8Array }>;
  readonly index?: (runs: readonly RunOnIndex[]) => Promise<string>;
  readonly derive?: DeriveSeries;
}

/** The renderer of the program. */
export function recordRenderer(port: FilePort): Renderer {
  return makeRecordRenderer(port, { seriesJson: renderSeriesJson, seriesCsv: renderSeriesCsv, report: renderReport });
}

export const derivedNames = ['series.json', 'series.csv', 'report.html', 'report.pdf'] as const;

/** Makes the derived files from the record alone, with the parts given. */
export function makeRecordRenderer(port: FilePort, parts: RenderParts): Renderer {
  const { index } = parts;
  return {
    derive: async (folder, lines): Promise<Result<Derived | undefined>> => {
      if (foldLedger(lines).method === undefined) return ok(undefined);
      const facts = await factsOf(port, folder, lines, parts.derive ?? deriveRunSeries);
      if (!facts.ok) return facts;
      const { series, method } = facts.value;
      const files = new Map<string, Uint8Array>();
      files.set('series.json', Buffer.from(parts.seriesJson(series)));
      files.set('series.csv', Buffer.from(parts.seriesCsv(series, method)));
      if (parts.report === undefined) return ok({ files, series });
      const report = await renderSafely(() => parts.report!(facts.value));
      if (!report.ok) return report;
      files.set('report.html', Buffer.from(report.value.html));
      files.set('report.pdf', report.value.pdf);
      return ok({ files, series });
    },
    ...(index !== undefined
      ? {
          index: async (runs) => {
            const page = await renderSafely(() => index(runs));
            return page.ok ? ok(Buffer.from(page.value)) : page;
          },
        }
      : {}),
  };
}

/** A fault while drawing must not stop the record: it is loud, and the rest goes on. */
async function renderSafely<T>(render: () => Promise<T>): Promise<Result<T>> {
  try {
    return ok(await render());
  } catch (cause) {
    const problem: Problem = {
      code: 'report-fault',
      area: 'report',
      message: `a fault in the program while the report was made: ${cause instanceof Error ? (cause.stack ?? cause.message) : String(cause)}`,
      hint: 'The record is whole. Please report these lines with the program version.',
      retry: 'later',
      cause,
    };
    return fail(problem);
  }
}
