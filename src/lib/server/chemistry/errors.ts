export type ChemistryErrorCode =
  'non-finite-value' | 'out-of-range' | 'too-many' | 'unknown-name' | 'unreadable-structure';

/** Raised when nothing can be said from what was given. The message names the place, the finding and the need. */
export class ChemistryError extends RangeError {
  readonly code: ChemistryErrorCode;

  constructor(code: ChemistryErrorCode, message: string) {
    super(message);
    this.name = 'ChemistryError';
    this.code = code;
  }
}
