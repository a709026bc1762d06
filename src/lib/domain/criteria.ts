/** What a rule can be about: the preparations, the line of a calibration, or what is run in the sequence to watch over it. */
export const ruleTypes = [
  'mean recovery',
  'relative standard deviation',
  'minimum preparations',
  'surrogate recovery',
  'individual recovery',
  'duplicate difference',
  'first preparation',
  'calibration error',
  'calibration error at the lowest level',
  'response factor deviation',
  'relative standard error',
  'determination coefficient',
  'minimum levels',
  'minimum levels of a curve',
  // In percent of the concentration that a check was made to.
  'second-source check',
  'continuing check',
  'continuing check at the lowest level',
  'closing check',
  // In percent of the analytes that a check holds.
  'analytes failing a check',
  'time between checks',
  // In percent of the mean area over the levels, or of that in the latest check that holds.
  'internal standard area',
  'internal standard area against the latest check',
  // In percent of the lowest level.
  'instrument blank'
] as const;
/** What a criteria set holds. */
export type WrittenRuleType = (typeof ruleTypes)[number];
/** A curve runs one way whatever a set says, so that nobody writes a rule for it. */
export type RuleType = WrittenRuleType | 'monotone curve';

/** One acceptance rule with the document it was taken from. A citation covers only what the document says. */
export interface CriterionRule {
  readonly type: RuleType;
  readonly low: number | null;
  readonly high: number | null;
  readonly unit: '%' | 'count' | '1' | 'h';
  /** Document, section, year; or "the lab's own". */
  readonly citation: string;
  readonly year: number | null;
  /** seen: read in the document; memory: from memory, verify before use; own: set by the lab. */
  readonly standing: 'seen' | 'memory' | 'own';
  readonly note: string | null;
}

/** A rule as a criteria set holds it. */
export type WrittenRule = CriterionRule & { readonly type: WrittenRuleType };

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
