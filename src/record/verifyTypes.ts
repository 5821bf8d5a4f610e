/** One thing that `verify` looked at. `note`: worth knowing, proves nothing wrong. */
export interface Check {
  readonly name: 'chain' | 'stored-files' | 'unreferenced' | 'recomputation' | 'derived-files' | 'head' | 'share';
  readonly state: 'pass' | 'note' | 'fail';
  readonly message: string;
  /** Ledger entry concerned. */
  readonly seq?: number;
  readonly file?: string;
}

export interface Verification {
  readonly run: string;
  readonly folder: string;
  readonly checks: readonly Check[];
  readonly head?: { readonly seq: number; readonly hash: string };
}

export function hasFailed({ checks }: Pick<Verification, 'checks'>): boolean {
  return checks.some(({ state }) => state === 'fail');
}
