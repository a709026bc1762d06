import type { MethodFigures } from './method-figures';
import type { Portion } from './portions';
import type { SequenceChecks } from './sequence-checks';
import type { Flag } from './sequence-types';
import type { Reported } from './types';

/** What a figure rests on that is flagged. */
export interface FigureFlags {
  /** Injections that the figure was formed from, and how many of them are flagged. */
  readonly injections: number;
  readonly flagged: number;
  readonly causes: readonly { readonly flag: Flag; readonly count: number }[];
}

/** The numbers that one portion's amounts were formed from. What is set aside counts for nothing. */
export function numbersOf(portion: Portion): Reported[] {
  if (portion.exclusion) return [];
  return portion.places.flatMap(({ exclusion, found }) =>
    exclusion ? [] : found.used.map((item) => ('trace' in item ? item.trace.reported : item.reported))
  );
}

/** The numbers that a recovery was formed from: those of its counted portions, and of the counted portions that were subtracted. */
export function numbersOfRecovery({ input }: MethodFigures): Reported[] {
  return [...input.counted, ...(input.subtracted?.counted ?? [])].flatMap(numbersOf);
}

/** The flags of one entry in the injections that some numbers came of; null: none is flagged. */
export function flagsOfNumbers(
  numbers: readonly Reported[],
  entryId: string,
  checks: Pick<SequenceChecks, 'flagsOf' | 'flags'>
): FigureFlags | null {
  if (checks.flags.size === 0) return null;
  const injections = new Set(numbers.map(({ injectionId }) => injectionId));
  const causes = new Map<string, { flag: Flag; count: number }>();
  let flagged = 0;
  for (const id of injections) {
    const own = checks.flagsOf(id, entryId);
    if (own.length > 0) flagged += 1;
    for (const flag of own) {
      // An internal standard is a cause in each injection; the first stands for all of the same rule.
      const key =
        flag.cause === 'internal standard'
          ? flag.rule.type
          : `${flag.cause} ${flag.side} ${flag.injectionId}`;
      const known = causes.get(key);
      if (known) known.count += 1;
      else causes.set(key, { flag, count: 1 });
    }
  }
  return flagged === 0 ? null : { injections: injections.size, flagged, causes: [...causes.values()] };
}

/**
 * "rests on 3 flagged injections of 7: the continuing check before them, CCV at 14:20, read Atrazine at 127 % of its concentration
 * (80 to 120 % asked for)".
 */
export function flagsText({ injections, flagged, causes }: FigureFlags): string {
  const which =
    injections === 1
      ? 'rests on a flagged injection'
      : flagged === injections
        ? `rests on ${injections} injections, all flagged`
        : flagged === 1
          ? `rests on 1 flagged injection of ${injections}`
          : `rests on ${flagged} flagged injections of ${injections}`;
  const clauses = causes.map(({ flag, count }) => {
    const text = count === 1 ? flag.text : flag.text.replace(/ (before|after) it,/, ' $1 them,');
    if (flag.cause === 'internal standard' && count > 1)
      return `${text}, and outside its window in ${count - 1} more`;
    return text;
  });
  return `${which}: ${clauses.join('; ')}`;
}
