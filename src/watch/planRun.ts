import { isKnown } from './knownFiles.js';
import type { RunMemory } from './runMemory.js';
import type { RunListing, SpectrumName } from './shareListing.js';
import { statText } from './statCache.js';
import type { WatchSession } from './watchTypes.js';

/** What a pass has to do in a run. */
export interface RunPlan {
  /** Quiet files to look into, by name. */
  readonly ready: readonly ReadyFile[];
  /** Files that must show quiet first, and how long still. */
  readonly waiting: readonly { readonly file: SpectrumName; readonly waitMs: number }[];
  /** Names that were waiting and are gone before they could be captured. */
  readonly vanished: readonly string[];
  /** Files whose results stand and which are no longer on the share; not yet noted. */
  readonly gone: readonly string[];
}

export interface ReadyFile {
  readonly spectrum: SpectrumName;
  readonly seenForMs: number;
}

/** Key of a file in the settling table: no name holds a zero byte. */
export function settleKey(runKey: string, fileKey: string): string {
  return `${runKey}\0${fileKey}`;
}

/** Compares a listing with the record and the settling table; touches no file. */
export function planRun(session: WatchSession, listing: RunListing, memory: RunMemory): RunPlan {
  const { clock, writer } = session.context;
  const ready: ReadyFile[] = [];
  const waiting: { file: SpectrumName; waitMs: number }[] = [];
  const present = new Set<string>();
  for (const spectrum of listing.spectra) {
    present.add(spectrum.key);
    if (isKnown(memory, spectrum, writer.program)) continue;
    const key = settleKey(listing.key, spectrum.key);
    const settled = session.settling.observe(key, spectrum.stat, clock.nowMs(), clock.monotonicMs());
    if (!settled.isQuiet) waiting.push({ file: spectrum, waitMs: settled.waitMs });
    else if (session.unfinished.get(key) === statText(spectrum.stat) && settled.seenForMs < session.settings.longestWaitMs)
      waiting.push({ file: spectrum, waitMs: session.settings.settleMs });
    else ready.push({ spectrum, seenForMs: settled.seenForMs });
  }
  return { ready, waiting, vanished: vanishedOf(session, listing, memory, present), gone: goneOf(memory, present) };
}

function vanishedOf(session: WatchSession, listing: RunListing, memory: RunMemory, present: ReadonlySet<string>): string[] {
  const prefix = settleKey(listing.key, '');
  const names = session.settling
    .keys()
    .filter((key) => key.startsWith(prefix))
    .map((key) => key.slice(prefix.length));
  return names.filter((name) => !present.has(name) && !memory.state.files.has(name));
}

function goneOf({ state }: RunMemory, present: ReadonlySet<string>): string[] {
  const noted = new Set(state.exceptions.filter(({ name }) => name === 'gone').flatMap(({ files }) => files ?? []));
  return [...state.files.values()]
    .filter(({ key, kept, file }) => kept.state !== 'vanished' && !present.has(key) && !noted.has(file))
    .map(({ file }) => file)
    .sort();
}
