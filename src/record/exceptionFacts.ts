import type { PointRecord } from '../point/pointRecord.js';
import type { Series } from '../series/series.js';
import { fileFacts } from './fileFacts.js';
import type { ExceptionName } from './ledgerEntry.js';
import type { RunState } from './runState.js';

export type ExceptionKind =
  | Exclude<ExceptionName, 'gone'>
  | 'gone'
  | 'late'
  | 'gap'
  | 'duplicate'
  | 'replaced'
  | 'vanished'
  | 'method-edited'
  | 'several-programs';

/** Something out of the ordinary, as reports show it. */
export interface ExceptionFact {
  readonly kind: ExceptionKind;
  readonly message: string;
  readonly file?: string;
  readonly files?: readonly string[];
  /** Ledger entry that tells of it. */
  readonly seq: number;
  readonly at: string;
}

/** Acquisition time of each measured content, for telling which came late. */
export type AcquiredBySha256 = ReadonlyMap<string, string>;

/**
 * Every exception of a run, by the entry that tells of it. The record alone decides: nothing here depends on the clock.
 *
 * @param acquired acquisition time, UTC, of each measured content
 */
export function exceptionFacts(state: RunState, acquired: AcquiredBySha256): ExceptionFact[] {
  const told: ExceptionFact[] = state.exceptions.map(({ name, message, file, files, seq, at }) => ({
    kind: name,
    message,
    ...(file !== undefined ? { file } : {}),
    ...(files !== undefined ? { files } : {}),
    seq,
    at,
  }));
  return [...told, ...ofFiles(state), ...ofMethods(state), ...late(state, acquired)].sort((a, b) => a.seq - b.seq);
}

function ofFiles(state: RunState): ExceptionFact[] {
  return fileFacts(state).flatMap((fact): ExceptionFact[] => {
    const { file, seq, at } = fact;
    const hash = fact.sha256?.slice(0, 12) ?? '';
    if (fact.state === 'duplicate') return [{ kind: 'duplicate', message: `same bytes as ${fact.duplicateOf}`, file, seq, at }];
    if (fact.state === 'vanished') return [{ kind: 'vanished', message: fact.reason ?? '', file, seq, at }];
    if (fact.state !== 'replaced') return [];
    return [
      {
        kind: 'replaced',
        message: `another content was seen under this name (${hash}); it is captured and does not count`,
        file,
        seq,
        at,
      },
    ];
  });
}

function ofMethods(state: RunState): ExceptionFact[] {
  const engines = [
    ...new Set([...state.files.values()].map(({ kept }) => kept.engine).filter((engine) => engine !== undefined)),
  ].sort();
  const last = [...state.files.values()].reduce(
    (most, { kept }) => (most === undefined || kept.seq > most.seq ? kept : most),
    undefined as { seq: number; at: string } | undefined,
  );
  const several: ExceptionFact[] =
    engines.length > 1 && last !== undefined
      ? [
          {
            kind: 'several-programs',
            message: `points were measured by program versions ${engines.join(', ')}`,
            seq: last.seq,
            at: last.at,
          },
        ]
      : [];
  const edited = state.revisions
    .filter(
      (revision) =>
        revision.state === 'noticed' &&
        !state.revisions.some(({ state: use, sha256 }) => use === 'used' && sha256 === revision.sha256),
    )
    .map(({ seq, at, revision, sha256, file }): ExceptionFact => {
      const message = `the method file was edited (revision ${revision}, ${sha256.slice(0, 12)}); the run goes on with the captured one`;
      return { kind: 'method-edited', message, file, seq, at };
    });
  return [...several, ...edited];
}

/** A file is late when a point acquired after it was already in the record. */
function late(state: RunState, acquired: AcquiredBySha256): ExceptionFact[] {
  const firstSeq = new Map<string, { seq: number; at: string; file: string }>();
  const inOrder = [...state.files.values()].map(({ kept }) => kept).sort((a, b) => a.seq - b.seq);
  for (const { sha256, seq, at, file } of inOrder) {
    if (sha256 !== undefined && !firstSeq.has(sha256)) firstSeq.set(sha256, { seq, at, file });
  }
  const facts: ExceptionFact[] = [];
  let latest = '';
  let latestFile = '';
  for (const [sha256, { seq, at, file }] of firstSeq) {
    const time = acquired.get(sha256);
    if (time === undefined) continue;
    if (time < latest)
      facts.push({ kind: 'late', message: `it came after ${latestFile}, which was acquired later`, file, seq, at });
    else [latest, latestFile] = [time, file];
  }
  return facts;
}

/** Acquisition times out of the point records of each file. */
export function acquiredTimes(
  files: readonly { readonly sha256: string; readonly records: readonly PointRecord[] }[],
): AcquiredBySha256 {
  const times = new Map<string, string>();
  for (const { sha256, records } of files) {
    const first = records
      .map(({ acquired }) => acquired)
      .filter((time) => time !== undefined)
      .sort()[0];
    if (first !== undefined) times.set(sha256, first);
  }
  return times;
}

/** Pauses that the series found before a point; told by the entry of that point. */
export function gapFacts(state: RunState, { points }: Pick<Series, 'points'>): ExceptionFact[] {
  return points.flatMap(({ file, sha256, flags }) => {
    const flag = flags.find(({ code }) => code === 'gap');
    const kept = [...state.files.values()].find((other) => other.file === file && other.kept.sha256 === sha256)?.kept;
    return flag !== undefined && kept !== undefined
      ? [{ kind: 'gap', message: flag.message, file, seq: kept.seq, at: kept.at }]
      : [];
  });
}
