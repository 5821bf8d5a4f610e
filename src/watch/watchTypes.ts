import type { Problem } from '../base/result.js';
import type { SiteFile } from '../method/site.js';
import type { Path } from '../record/filePort.js';
import type { Measurer } from '../record/measurer.js';
import type { RecordContext } from '../record/recordContext.js';
import type { Renderer } from '../record/renderer.js';
import type { Series } from '../series/series.js';
import type { RunMemory } from './runMemory.js';
import type { Settling } from './settling.js';
import type { ShareReader } from './shareReader.js';
import type { WatchNews } from './watchNews.js';

/** One thing that happened, for whoever looks on. Text from files is not yet escaped. */
export interface WatchEvent {
  readonly kind:
    | 'run'
    | 'taken'
    | 'waiting'
    | 'set-aside'
    | 'incomplete'
    | 'duplicate'
    | 'replaced'
    | 'vanished'
    | 'rendered'
    | 'skipped'
    | 'share-away'
    | 'share-back'
    | 'problem'
    | 'note';
  readonly run?: string;
  readonly file?: string;
  readonly message: string;
  readonly problem?: Problem;
}

export interface WatchSettings {
  /** As given on the command line; absolute. */
  readonly share: string;
  readonly outputFolder: Path;
  readonly settleMs: number;
  /** One pass, then done. */
  readonly isOnce: boolean;
  readonly pollMs: number;
  /** An unfinished file is set down as incomplete after this long, and taken up again when it changes. */
  readonly longestWaitMs: number;
  /** Default method: its path. */
  readonly methodPath?: string;
  /** A run that is not finished is silent when no time point came for this long. */
  readonly silentAfterMs?: number;
  readonly site?: { readonly path: string; readonly file: SiteFile };
}

/** Everything that a watch holds from pass to pass. */
export interface WatchSession {
  readonly context: RecordContext;
  readonly settings: WatchSettings;
  readonly reader: ShareReader;
  readonly measurer: Measurer;
  readonly renderer: Renderer;
  readonly settling: Settling;
  readonly runs: Map<string, RunMemory>;
  /** Quiet but unfinished files, with the stat under which they were last read: not read again until they change. */
  readonly unfinished: Map<string, string>;
  /** When each run was last rendered, by the monotonic clock. */
  readonly renderedMs: Map<string, number>;
  /** The series as last derived, by run folder. */
  readonly series: Map<string, Series>;
  /** Links that were already told about. */
  readonly skippedTold: Set<string>;
  /** Set when a record changed: then the page of all runs is drawn again. */
  isIndexStale: boolean;
  /** Set in the last turn of a single pass: what still changes is set down as incomplete. */
  isLastPass: boolean;
  readonly onEvent: (event: WatchEvent) => void;
  /** Tells people and machines; called while no record is held. */
  readonly tell?: (news: WatchNews) => Promise<void>;
  /** When each run last took in a time point, by the monotonic clock. */
  readonly takenMs: Map<string, number>;
  /** Given when the watch should end: the current append is finished, nothing new is begun. */
  readonly signal?: AbortSignal;
}

/** What capturing, measuring and committing need of a session. */
export type MeasureDeps = Pick<WatchSession, 'context' | 'measurer' | 'signal'>;

/** What rendering needs of a session. */
export type RenderDeps = Pick<WatchSession, 'context' | 'renderer' | 'renderedMs' | 'series'>;
