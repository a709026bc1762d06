import type { RecoveryCriteria } from '../../domain/criteria';
import type { Verdict } from '../../domain/vocabulary';
import { assess, massBalance, type Value } from '../stats';
import type { RecoveryInput } from './recovery-input';
import type { Portion } from './portions';

type Balance = ReturnType<typeof massBalance>;
export type Total = NonNullable<Balance['method']>;

/** Which end of the truth a figure with not-detected values is formed at. */
export type End = 'zero' | 'high' | 'low';

/** What one experiment says of one analyte. */
export interface MethodFigures {
  readonly input: RecoveryInput;
  readonly balance: Balance;
  /** null: no verdict can be formed; `reasons` says why. */
  readonly verdict: Verdict | null;
  readonly reasons: readonly string[];
  /** Portions that lack a fraction, by name, for the method figure and for the balance. */
  readonly incomplete: {
    readonly method: readonly IncompletePortion[];
    readonly balance: readonly IncompletePortion[];
  };
  /** Mean at the other ends, where something was not detected: at its limit, and with what is subtracted at its limit. */
  readonly ends: { readonly low: number | null; readonly high: number | null } | null;
}

export interface IncompletePortion {
  readonly portion: Portion;
  /** "Second elution: set aside (vial cracked)". */
  readonly lacks: readonly string[];
}

/** Over this many times the spike a native amount leaves no verdict; over one time it leaves no `inside`. Common practice, no source. */
const nativeLimits = { watch: 100, none: 400 };

/**
 * Method recovery, mass balance and verdict of one analyte in one experiment.
 *
 * The verdict is formed with every not-detected value as zero, at its limit, and with what is subtracted at its limit; where
 * these differ it is `watch`. A subtracted amount above the spike turns inside into watch; above four times the spike no
 * verdict is formed.
 */
export function methodFigures(
  input: RecoveryInput,
  criteria: RecoveryCriteria | null,
  level = 0.95
): MethodFigures {
  const balance = balanceOf(input, 'zero', level);
  const uncertain = hasNotDetected(input);
  const low = uncertain ? balanceOf(input, 'low', level).method : null;
  const high = uncertain ? balanceOf(input, 'high', level).method : null;
  return {
    input,
    balance,
    ...judged(input, balance.method, low, high, criteria),
    incomplete: {
      method: balance.incomplete.method.map((index) => lacking(input, index, 'method')),
      balance: balance.incomplete.balance.map((index) => lacking(input, index, 'all'))
    },
    ends: uncertain ? { low: low?.mean ?? null, high: high?.mean ?? null } : null
  };
}

/** The statistics of an input with not-detected values taken at one end. */
export function balanceOf(input: RecoveryInput, end: End, level = 0.95): Balance {
  const { replicates, native } = atEnd(input, end);
  return massBalance({
    replicates,
    fractions: input.fractions.map((fraction) => ({ name: fraction.id, countsAs: fraction.countsAs })),
    ...(native ? { native } : {}),
    ...(input.batches && input.subtracted?.nativeBatches
      ? { batches: input.batches, nativeBatches: input.subtracted.nativeBatches }
      : {}),
    level
  });
}

/**
 * Values with not-detected resolved: as they stand (counted as zero), `high`: those of the spiked portions at their limit, `low`:
 * those of the subtracted portions at theirs.
 */
export function atEnd(
  input: RecoveryInput,
  end: End
): {
  readonly replicates: readonly Readonly<Record<string, Value>>[];
  readonly native: readonly Readonly<Record<string, Value>>[] | null;
} {
  const native = input.subtracted?.native ?? null;
  if (end === 'high') return { replicates: input.replicates.map(atLimit), native };
  if (end === 'low') return { replicates: input.replicates, native: native && native.map(atLimit) };
  return { replicates: input.replicates, native };
}

function judged(
  input: RecoveryInput,
  method: Total | null,
  low: Total | null,
  high: Total | null,
  criteria: RecoveryCriteria | null
): Pick<MethodFigures, 'verdict' | 'reasons'> {
  if (!method) return { verdict: null, reasons: ['no portion is complete in the fractions of the method'] };
  if (!criteria) return { verdict: null, reasons: ['the study has no criteria for mean recovery'] };
  const subtracted = input.subtracted;
  const named = subtracted?.kind === 'method blank' ? 'the method blank holds' : 'the native amount is';
  if (subtracted && subtracted.meanPercent > nativeLimits.none) {
    return {
      verdict: null,
      reasons: [
        `${named} ${digits(subtracted.meanPercent / 100)} times the spike: not assessable over 4 times`
      ]
    };
  }
  const main = assess(method, criteria);
  const others = [low, high].filter((total) => total !== null).map((total) => assess(total, criteria));
  const differing = others.find((other) => other.verdict !== main.verdict);
  if (differing && main.verdict !== 'too few') {
    const [worse, better] = [main, differing];
    return {
      verdict: 'watch',
      reasons: [
        `not detected counts between zero and its limit: ${worse.verdict} at the one end, ${better.verdict} at the other`,
        ...new Set([...main.reasons, ...differing.reasons])
      ]
    };
  }
  if (main.verdict === 'inside' && subtracted && subtracted.meanPercent > nativeLimits.watch) {
    return {
      verdict: 'watch',
      reasons: [
        `${named} ${digits(subtracted.meanPercent / 100)} times the spike, so it weighs more than the spike itself`
      ]
    };
  }
  return { verdict: main.verdict, reasons: main.reasons };
}

function lacking(input: RecoveryInput, index: number, which: 'method' | 'all'): IncompletePortion {
  const portion = input.counted[index]!;
  const lacks = portion.places
    .filter((place) => place.ng === null && (which === 'all' || place.fraction.countsAs === 'method'))
    .map((place) => {
      const { amount } = place.found;
      const why = place.exclusion
        ? `set aside (${place.exclusion.cause})`
        : 'reason' in amount
          ? amount.reason
          : 'no figure';
      return `${place.fraction.name}: ${why}`;
    });
  return { portion, lacks };
}

/** True when anything that went into the figure, or is subtracted, was not detected. */
export function hasNotDetected(input: RecoveryInput): boolean {
  return [...input.replicates, ...(input.subtracted?.native ?? [])].some((record) =>
    Object.values(record).some((value) => value !== null && typeof value === 'object')
  );
}

function atLimit(record: Readonly<Record<string, Value>>): Record<string, Value> {
  return Object.fromEntries(
    Object.entries(record).map(([key, value]) => [
      key,
      value !== null && typeof value === 'object' ? value.below : value
    ])
  );
}

function digits(value: number): string {
  return String(Number(value.toPrecision(3)));
}
