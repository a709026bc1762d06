import type { ValidationPartKey } from '../../../../domain/validation-parts';
import { validationPartTitles } from '../../../../domain/validation-parts';
import type { ValidationPart } from '../../../../views/validation';
import { countsOf } from './cells';
import type { ValidationContext } from './context';

type Own = Pick<ValidationPart, 'meaning'> &
  Partial<
    Pick<
      ValidationPart,
      'rests' | 'rules' | 'beside' | 'missing' | 'notes' | 'tables' | 'charts' | 'pairs' | 'pairChoices'
    >
  >;

/** A part with what it does not have left empty. */
export function partOf(context: ValidationContext, key: ValidationPartKey, own: Own): ValidationPart {
  const evidence = context.evidence(key).view;
  const empty = evidence.state === 'none';
  return {
    key,
    title: validationPartTitles[key],
    evidence,
    rules: [],
    beside: [],
    missing: [],
    notes: [],
    charts: [],
    pairs: [],
    pairChoices: [],
    ...own,
    rests: empty ? [] : (own.rests ?? []),
    tables: empty ? [] : (own.tables ?? []),
    counts: countsOf(empty ? [] : (own.tables ?? []))
  };
}
