/** One event of the history page. */
export interface HistoryEvent {
  readonly seq: number;
  /** ISO 8601, UTC. */
  readonly at: string;
  readonly actorName: string;
  readonly action: string;
  readonly entity: string;
  readonly studyCode: string | null;
  readonly sentence: string;
  readonly reason: string | null;
  readonly before: unknown;
  readonly after: unknown;
  readonly hash: string;
}

/** What the filters of the history page offer. */
export interface HistoryChoices {
  readonly people: readonly { readonly id: string; readonly name: string }[];
  readonly entities: readonly string[];
}

export interface HistoryPage {
  readonly events: readonly HistoryEvent[];
  /** `before` of the next page; null on the last. */
  readonly older: number | null;
  readonly choices: HistoryChoices;
}
