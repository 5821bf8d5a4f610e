/** A column of a table. */
export interface Column {
  readonly head: string;
  readonly align: 'left' | 'right';
  /** Relative width on paper. */
  readonly weight: number;
}

export type Block =
  | { readonly kind: 'text'; readonly text: string; readonly tone?: 'lead' | 'note' }
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
      readonly half?: boolean;
    }
  | { readonly kind: 'code'; readonly text: string };

export interface Section {
  readonly id: string;
  readonly heading: string;
  readonly blocks: readonly Block[];
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
  readonly verdict: readonly string[];
  readonly sections: readonly Section[];
}
