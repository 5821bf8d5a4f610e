import type { RunState, StampedInput } from './runState.js';

export type FileFate = 'measured' | 'duplicate' | 'set-aside' | 'incomplete' | 'vanished' | 'replaced';

/** One content under one name, and what became of it: counts in equal counts out. */
export interface FileFact {
  readonly file: string;
  readonly sha256?: string;
  readonly sizeBytes?: number;
  readonly state: FileFate;
  /** Ledger entry that says so. */
  readonly seq: number;
  readonly at: string;
  readonly methodSha256?: string;
  readonly engine?: string;
  readonly reason?: string;
  /** Name of the file whose bytes are the same. */
  readonly duplicateOf?: string;
}

/** Every content that was seen under every name, by name. */
export function fileFacts(state: RunState): FileFact[] {
  const sorted = [...state.files.values()].sort((a, b) => (a.key < b.key ? -1 : 1));
  const firstName = new Map<string, string>();
  return sorted.flatMap(({ kept, others, file }) => {
    const duplicateOf = kept.sha256 !== undefined && kept.state === 'measured' ? firstName.get(kept.sha256) : undefined;
    if (kept.sha256 !== undefined && duplicateOf === undefined) firstName.set(kept.sha256, file);
    const own = factOf(kept, duplicateOf !== undefined ? 'duplicate' : kept.state, duplicateOf);
    return [own, ...others.map((other) => factOf(other, 'replaced'))];
  });
}

function factOf(input: StampedInput, state: FileFate, duplicateOf?: string): FileFact {
  const { file, sha256, sizeBytes, seq, at, methodSha256, engine, flags } = input;
  const reason = flags?.[0]?.message;
  return {
    file,
    ...(sha256 !== undefined ? { sha256 } : {}),
    ...(sizeBytes !== undefined ? { sizeBytes } : {}),
    state,
    seq,
    at,
    ...(methodSha256 !== undefined ? { methodSha256 } : {}),
    ...(engine !== undefined ? { engine } : {}),
    ...(reason !== undefined ? { reason } : {}),
    ...(duplicateOf !== undefined ? { duplicateOf } : {}),
  };
}
