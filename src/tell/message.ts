/** What is told: documented JSON for machines, the same words for people. Numbers are those of the series. */
export interface Message {
  readonly format: 'kinetrail.message/1';
  readonly run: string;
  /** `target-reached`, `stalled`, `limit-broken`, `new-signal`, `balance-lost`, `silent`, `trouble`, `final-report`. */
  readonly event: string;
  /** Why, in words. */
  readonly evidence: string;
  /** Path of the run's report on the machine that watches; absent when there is none yet. */
  readonly report?: string;
  /** Equal for the same event of the same run: a receiver that sees it twice drops the second (delivery is at least once). */
  readonly key: string;
}

/** Where a message goes. */
export interface Target {
  /** As the ledger names it; holds no secret. */
  readonly name: string;
  readonly on: readonly string[];
  /** @returns undefined when delivered, else why not */
  send(message: Message, signal: AbortSignal): Promise<string | undefined>;
}
