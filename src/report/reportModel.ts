/** A column of a table. */
export interface Column {
  readonly head: string;
  readonly align: 'left' | 'right';
  /** Relative width on paper. */
  readonly weight: number;
}

export type Block =
  | { readonly kind: 'text'; readonly text: string; readonly tone?: 'lead' | 'note' }
  | { readonly kind: 'subheading'; readonly text: string }
  | { readonly kind: 'list'; readonly items: readonly string[] }
  | { readonly kind: 'facts'; readonly facts: readonly (readonly [label: string, value: string])[] }
  | {
      readonly kind: 'table';
      readonly caption: string;
      readonly columns: readonly Column[];
      readonly rows: readonly (readonly string[])[];
      readonly small?: boolean;
    }
  | {
      readonly kind: 'figure';
      readonly title: string;
      readonly description: string;
      readonly svg: string;
      readonly widthPx: number;
      readonly heightPx: number;
      /** How many stand side by side; 1 when absent. */
      readonly perRow?: 2 | 3;
      /** The numbers behind the drawing, for those who cannot see it; only where no other table gives them. */
      readonly numbers?: Extract<Block, { kind: 'table' }>;
    }
  | { readonly kind: 'code'; readonly text: string };

export interface Section {
  readonly id: string;
  readonly heading: string;
  readonly blocks: readonly Block[];
}

/** One answer of page 1, large. */
export interface Highlight {
  readonly label: string;
  readonly value: string;
  readonly detail: string;
  readonly tone: 'good' | 'look' | 'plain';
}

/** Drawings of the time points for choosing one in the page, each value in two characters: see `deriveTraces`. */
export interface Traces {
  readonly note: string;
  readonly points: readonly TracePoint[];
}

export interface TracePoint {
  readonly label: string;
  readonly words: readonly string[];
  readonly overview?: { readonly firstPpm: number; readonly lastPpm: number; readonly low: string; readonly high: string };
  readonly strips: readonly {
    readonly signal: string;
    readonly firstPpm: number;
    readonly stepPpm: number;
    readonly data: string;
    readonly fit: string;
  }[];
}

/** The report as both HTML and PDF draw it: every number formatted and every sentence chosen once. */
export interface ReportModel {
  readonly title: string;
  readonly reportId: string;
  readonly isFinal: boolean;
  readonly createdUtc: string;
  readonly program: string;
  readonly batch: string;
  readonly identity: readonly (readonly [label: string, value: string])[];
  readonly highlights: readonly Highlight[];
  readonly verdict: readonly string[];
  readonly sections: readonly Section[];
  readonly traces?: Traces;
}
