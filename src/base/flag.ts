/** A reason, as a stable code in words and a sentence that a chemist understands. */
export interface Flag {
  readonly code: string;
  readonly message: string;
  /** `<species>/<signal>` when the reason concerns one signal. */
  readonly signal?: string;
  /** `flag` (default) makes a point `flagged`; `set-aside` makes it unusable; `note` is shown but changes no status. */
  readonly weight?: 'note' | 'flag' | 'set-aside';
}
