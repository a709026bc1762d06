import { StatsError } from './errors';

/** Beyond this a square overflows; no amount, area or percentage comes near. */
const largest = 1e100;

/** Returns the number, or throws when it is not a finite number. */
export function finite(value: number, what: string): number {
  if (typeof value !== 'number' || !Number.isFinite(value)) {
    throw new StatsError('non-finite-value', `${what} must be a finite number, found ${String(value)}.`);
  }
  if (value > largest || value < -largest) {
    throw new StatsError('out-of-range', `${what} must lie within ±1e100, found ${value}.`);
  }
  return value;
}

/** Returns the number, or throws when it is not finite and above zero. */
export function positive(value: number, what: string): number {
  if (finite(value, what) <= 0) {
    throw new StatsError('out-of-range', `${what} must be above zero, found ${value}.`);
  }
  return value;
}

/** Returns the number, or throws when it is not finite and zero or above. */
export function notNegative(value: number, what: string): number {
  if (finite(value, what) < 0) {
    throw new StatsError('out-of-range', `${what} must not be below zero, found ${value}.`);
  }
  return value;
}

/** Returns a probability strictly between 0 and 1, or throws. Used for levels, significance levels and powers. */
export function fractionOfOne(value: number, what: string): number {
  if (finite(value, what) <= 0 || value >= 1) {
    throw new StatsError('out-of-range', `${what} must lie between 0 and 1, found ${value}.`);
  }
  return value;
}

/** Throws unless there are at least `least` values and all are finite; returns them unchanged. */
export function finiteValues<T extends ArrayLike<number>>(values: T, what: string, least = 1): T {
  const length = values === null || values === undefined ? 0 : values.length;
  if (!(length > 0)) {
    throw new StatsError('empty-group', `${what}: no value is given, at least ${least} needed.`);
  }
  if (length < least) {
    throw new StatsError('too-few-values', `${what}: ${length} given, at least ${least} needed.`);
  }
  for (let i = 0; i < length; i += 1) {
    const value = values[i] as number;
    // One comparison catches infinity and the oversized; NaN and non-numbers fail it too.
    if (!(typeof value === 'number' && value <= largest && value >= -largest)) {
      finite(value, `${what}, value ${i + 1}`);
    }
  }
  return values;
}

/** Throws unless there are at least `leastGroups` groups of at least `leastEach` finite values. */
export function finiteGroups(
  groups: readonly (readonly number[])[],
  what: string,
  leastGroups = 2,
  leastEach = 1
): void {
  const count = groups?.length ?? 0;
  if (count === 0) throw new StatsError('empty-group', `${what}: no group is given.`);
  if (count < leastGroups) {
    throw new StatsError('too-few-values', `${what}: ${count} group given, at least ${leastGroups} needed.`);
  }
  groups.forEach((group, index) => finiteValues(group, `${what}, group ${index + 1}`, leastEach));
}

/** Throws unless both lists are equally long. */
export function sameLength(found: number, expected: number, what: string): void {
  if (found !== expected) {
    throw new StatsError('mismatch', `${what}: ${found} given, ${expected} expected.`);
  }
}
