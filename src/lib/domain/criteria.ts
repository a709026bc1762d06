/** One acceptance rule with the document it was taken from. A citation covers only what the document says. */
export interface CriterionRule {
  readonly type:
    | 'mean recovery'
    | 'relative standard deviation'
    | 'minimum preparations'
    | 'surrogate recovery'
    | 'calibration error'
    | 'calibration error at the lowest level'
    | 'response factor deviation'
    | 'determination coefficient'
    | 'duplicate difference'
    | 'individual recovery'
    | 'first preparation';
  readonly low: number | null;
  readonly high: number | null;
  readonly unit: '%' | 'count' | '1';
  /** Document, section, year; or "the lab's own". */
  readonly citation: string;
  readonly year: number | null;
  /** seen: read in the document; memory: from memory, verify before use; own: set by the lab. */
  readonly standing: 'seen' | 'memory' | 'own';
  readonly note: string | null;
}

/** What a mean recovery and its RSD are held against, with the rules they came from. */
export interface RecoveryCriteria {
  readonly low: number;
  readonly high: number;
  readonly rsdMax: number | null;
  readonly nMin: number;
}

/** Criteria of one analyte in place of the set's, with the reason that they differ. */
export interface CriteriaOverride extends RecoveryCriteria {
  readonly reason: string;
}
