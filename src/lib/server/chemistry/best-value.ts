import { within } from './guards';

export interface TypedValue {
  readonly value: number;
  /** Where whoever typed it took it from; null where the library does not say. */
  readonly source: string | null;
}

export interface PredictedValue {
  readonly value: number;
  /** What predicted it. */
  readonly source: string;
}

export interface BestValue {
  readonly value: number;
  readonly standing: 'typed' | 'predicted';
  readonly source: string;
}

/**
 * The value to use: a typed or measured one always wins over a predicted one, and the answer says which it is.
 * @returns null when there is neither
 * @throws ChemistryError when the value that counts is not a finite number
 */
export function bestValue(typed: TypedValue | null, predicted: PredictedValue | null): BestValue | null {
  const winner = typed ?? predicted;
  if (winner === null) return null;
  within(winner.value, typed ? 'The typed value' : 'The predicted value', -1e15, 1e15);
  return {
    value: winner.value,
    standing: typed ? 'typed' : 'predicted',
    source: winner.source ?? 'typed into the library without a source'
  };
}
