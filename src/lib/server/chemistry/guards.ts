import { ChemistryError } from './errors';

/** Returns the number, or throws when it is not a finite one within the bounds. */
export function within(value: number, what: string, low: number, high: number): number {
  if (typeof value !== 'number' || !Number.isFinite(value)) {
    throw new ChemistryError(
      'non-finite-value',
      `${what} must be a finite number, found ${typeof value === 'string' ? `'${String(value)}'` : String(value)}.`
    );
  }
  if (value < low || value > high) {
    throw new ChemistryError('out-of-range', `${what} must lie between ${low} and ${high}, found ${value}.`);
  }
  return value;
}

/** Beyond this no amount, volume or pressure of a laboratory comes near. */
const largest = 1e15;

/** Returns the number, or throws when it is not finite and zero or above. */
export function notNegative(value: number, what: string): number {
  if (within(value, what, -largest, largest) < 0) {
    throw new ChemistryError('out-of-range', `${what} must not be below zero, found ${value}.`);
  }
  return value;
}

/** Returns the number, or throws when it is not finite and above zero. */
export function positive(value: number, what: string): number {
  if (within(value, what, -largest, largest) <= 0) {
    throw new ChemistryError('out-of-range', `${what} must be above zero, found ${value}.`);
  }
  return value;
}

/** Returns a share strictly between 0 and 1, or throws. */
export function share(value: number, what: string): number {
  if (within(value, what, 0, 1) === 0 || value === 1) {
    throw new ChemistryError('out-of-range', `${what} must lie between 0 and 1, found ${value}.`);
  }
  return value;
}

/** Returns a pH, or throws where water has none. */
export function phOf(value: number, what = 'The pH'): number {
  return within(value, what, -2, 16);
}

/** Returns a log Kow, or throws where no substance has one; the library takes the same bounds. */
export function logKowOf(value: number): number {
  return within(value, 'The log Kow', -20, 30);
}

/** Throws unless `value` is one of the words; says which there are. */
export function oneOf<Word extends string>(value: string, words: readonly Word[], what: string): Word {
  const found = words.find((word) => word === value);
  if (found === undefined) {
    throw new ChemistryError(
      'unknown-name',
      `${what} '${value}' is not known. There are: ${words.join(', ')}.`
    );
  }
  return found;
}
