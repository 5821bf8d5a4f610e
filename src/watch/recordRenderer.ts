import { fail, ok, type Problem, type Result } from '../base/result.js';
import { isUtf8Name, pathText } from '../record/bytePath.js';
import { deriveRunSeries } from '../record/deriveRunSeries.js';
import type { FilePort, Path } from '../record/filePort.js';
import { dataHeadOf } from '../record/ledger.js';
import type { Derived, Renderer, RunOnIndex } from '../record/renderer.js';
import { type DeriveSeries, factsOf, type RunFacts } from '../record/runFacts.js';
import { foldLedger } from '../record/runState.js';
import { type IndexCard, indexCard } from '../report/indexCard.js';
import { renderIndex } from '../report/renderIndex.js';
import { renderReport } from '../report/renderReport.js';
import { renderSeriesCsv } from '../series/renderSeriesCsv.js';
import { renderSeriesJson } from '../series/renderSeriesJson.js';
import type { Series } from '../series/series.js';

/** The functions that turn facts into bytes. */
export interface RenderParts {
  readonly seriesJson: (series: Series) => string;
  readonly seriesCsv: (series: Series, method: RunFacts['method']) => string;
  readonly report?: (facts: RunFacts) => Promise<{ readonly html: string; readonly pdf: Uint8Array }>;
  readonly index?: (cards: readonly IndexCard[], createdUtc: string | undefined) => string;
  readonly derive?: DeriveSeries;
}

/** The renderer of the program. */
export function recordRenderer(port: FilePort): Renderer {
  return makeRecordRenderer(port, {
    seriesJson: renderSeriesJson,
    seriesCsv: renderSeriesCsv,
    report: renderReport,
    index: renderIndex,
  });
}

export const derivedNames = ['series.json', 'series.csv', 'report.html', 'report.pdf'] as const;

/** Makes the derived files from the record alone, with the parts given. */
export function makeRecordRenderer(port: FilePort, parts: RenderParts): Renderer {
  const { index, derive = deriveRunSeries } = parts;
  const cards: CardCache = new Map();
  return {
    derive: async (folder, lines): Promise<Result<Derived | undefined>> => {
      if (foldLedger(lines).method === undefined) return ok(undefined);
      const facts = await factsOf(port, folder, lines, derive);
      if (!facts.ok) return facts;
      const { series, method, head } = facts.value;
      cards.set(pathText(folder), { hash: head.hash, card: cardOf(facts.value) });
      const files = new Map<string, Uint8Array>();
      files.set('series.json', Buffer.from(parts.seriesJson(series)));
      files.set('series.csv', Buffer.from(parts.seriesCsv(series, method)));
      if (parts.report === undefined) return ok({ files, series });
      const report = await renderSafely(async () => parts.report!(facts.value));
      if (!report.ok) return report;
      files.set('report.html', Buffer.from(report.value.html));
      files.set('report.pdf', report.value.pdf);
      return ok({ files, series });
    },
    series: async (folder, lines) => {
      const facts = await factsOf(port, folder, lines, derive);
      return facts.ok ? ok(facts.value.series) : facts;
    },
    ...(index !== undefined ? { index: (runs) => drawIndex(port, runs, cards, index, derive) } : {}),
  };
}

/** Cards of runs as last derived, by folder; the address is added when the page is drawn. */
type CardCache = Map<string, { readonly hash: string; readonly card: IndexCard }>;

function cardOf({ series, runFile, method }: RunFacts): IndexCard {
  return indexCard(series, [], runFile.batch, method.conversion?.target);
}

async function drawIndex(
  port: FilePort,
  runs: readonly RunOnIndex[],
  cards: CardCache,
  index: NonNullable<RenderParts['index']>,
  derive: DeriveSeries,
): Promise<Result<Uint8Array>> {
  const drawn: IndexCard[] = [];
  const times: string[] = [];
  for (const { folder, lines, names } of runs) {
    if (foldLedger(lines).method === undefined) continue;
    const head = dataHeadOf(lines);
    const known = cards.get(pathText(folder));
    const card = known?.hash === head.hash ? ok(known.card) : await freshCard(port, folder, lines, derive);
    // A record that cannot be read is told of where it is worked on; the page shows the others.
    if (!card.ok) continue;
    cards.set(pathText(folder), { hash: head.hash, card: card.value });
    times.push(lines[head.seq - 1]!.entry.at);
    drawn.push({ ...card.value, href: [...names.map(addressOf), 'report.html'].join('/') });
  }
  const page = await renderSafely(async () => index(drawn, times.sort().at(-1)));
  return page.ok ? ok(Buffer.from(page.value)) : page;
}

async function freshCard(
  port: FilePort,
  folder: Path,
  lines: RunOnIndex['lines'],
  derive: DeriveSeries,
): Promise<Result<IndexCard>> {
  const facts = await factsOf(port, folder, lines, derive);
  return facts.ok ? ok(cardOf(facts.value)) : facts;
}

/** A folder name as part of an address: names that are not UTF-8 byte by byte. */
function addressOf(name: Buffer): string {
  if (isUtf8Name(name)) return encodeURIComponent(name.toString('utf8'));
  return [...name].map((byte) => `%${byte.toString(16).padStart(2, '0')}`).join('');
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
