export type StatsErrorCode =
  | 'too-few-values'
  | 'non-finite-value'
  | 'zero-spike'
  | 'empty-group'
  | 'singular-design'
  | 'out-of-range'
  | 'mismatch';

/** Raised when figures cannot be formed from what was given. The message names the place, the finding and the need. */
export class StatsError extends RangeError {
  readonly code: StatsErrorCode;

  constructor(code: StatsErrorCode, message: string) {
    super(message);
    this.name = 'StatsError';
    this.code = code;
  }
}
