import type { CheckReading, SequenceInjection } from './sequence-types';

/** What stands at the two sides of one extract for one analyte; null: nothing does. */
export interface Bracket {
  /** The nearest check before it that reads the analyte; 'levels': the calibration itself comes nearer. */
  readonly before: CheckReading | 'levels' | null;
  /** The nearest check after it that reads the analyte, with no calibration in between. */
  readonly after: CheckReading | null;
}

/**
 * The brackets of one analyte in one run: every extract lies between the check before and the check after it. The levels open a bracket
 * (what they were fitted to needs no check yet) and never close one. A check without a reading of the analyte is no end
 * of a bracket.
 *
 * @param injections of one run that are read by one set, in order
 * @param readingOf the continuing check's reading of the analyte in an injection; null: it is none, or has none
 * @returns by injection id, of extracts only
 */
export function bracketsOf(
  injections: readonly SequenceInjection[],
  readingOf: (injectionId: string) => CheckReading | null
): ReadonlyMap<string, Bracket> {
  const before = new Map<string, Bracket['before']>();
  let open: Bracket['before'] = null;
  for (const { id, subject } of injections) {
    if (subject.kind === 'extract') before.set(id, open);
    else if (subject.kind === 'level') open = 'levels';
    else open = readingOf(id) ?? open;
  }
  const brackets = new Map<string, Bracket>();
  let close: Bracket['after'] = null;
  for (const { id, subject } of [...injections].reverse()) {
    if (subject.kind === 'extract') brackets.set(id, { before: before.get(id) ?? null, after: close });
    else if (subject.kind === 'level') close = null;
    else close = readingOf(id) ?? close;
  }
  return brackets;
}
