import type { RunFacts } from '../record/runFacts.js';
import { renderSeriesJson } from '../series/renderSeriesJson.js';
import type { ReportInput } from './reportInput.js';

/** What the report needs of a run's facts. */
export function reportInputOf(facts: RunFacts): ReportInput {
  const amended = facts.amendments.map(({ at, action, file, point, by, because }) => ({
    at,
    kind: action,
    what: file ?? point?.slice(0, 12) ?? 'the run',
    by,
    because,
  }));
  const revised = facts.revisions
    .filter(({ revision }) => revision > 1)
    .map(({ at, revision, title, version, state, by, because, sha256 }) => ({
      at,
      kind: `method revision ${revision} (${state})`,
      what: `${title}, version ${version}, ${sha256.slice(0, 12)}`,
      by: by ?? 'seen by the watch',
      because: because ?? 'the method file changed',
    }));
  return {
    series: facts.series,
    method: facts.method,
    methodText: facts.methodText,
    runFile: facts.runFile,
    head: facts.head,
    createdUtc: facts.createdUtc,
    program: facts.program,
    changes: [...amended, ...revised].sort((a, b) => (a.at < b.at ? -1 : a.at > b.at ? 1 : 0)),
    exceptions: facts.exceptions.map(({ at, kind, message, file }) => ({
      at,
      kind,
      message: file !== undefined ? `${file}: ${message}` : message,
    })),
    files: facts.files.map(({ file, sha256, state }) => ({ file, sha256: sha256 ?? '', state })),
    attachments: { seriesJson: renderSeriesJson(facts.series), ledgerText: facts.ledgerText },
  };
}
