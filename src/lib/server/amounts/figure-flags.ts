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
  readonly causes: readonly FigureCause[];
}

interface FigureCause {
  readonly flag: Flag;
  /** Flagged injections that it concerns. */
  readonly count: number;
  readonly sides: ReadonlySet<Flag['side']>;
}

/** method: what ends in the final extract, which the method recovery is formed from; balance: every fraction. */
export type FlaggedPart = 'method' | 'balance';

/** The numbers that one portion's amounts were formed from. What is set aside counts for nothing. */
export function numbersOf(portion: Portion, part: FlaggedPart): Reported[] {
  if (portion.exclusion) return [];
  return portion.places.flatMap(({ exclusion, found, fraction }) =>
    exclusion || (part === 'method' && fraction.countsAs !== 'method')
      ? []
      : found.used.map((item) => ('trace' in item ? item.trace.reported : item.reported))
  );
}

/** The numbers that a recovery was formed from: those of its counted portions, and of the counted portions that were subtracted. */
export function numbersOfRecovery({ input }: Pick<MethodFigures, 'input'>, part: FlaggedPart): Reported[] {
  return [...input.counted, ...(input.subtracted?.counted ?? [])].flatMap((portion) =>
    numbersOf(portion, part)
  );
}

/** The flags of one entry in the injections that some numbers came of; null: none is flagged. */
export function flagsOfNumbers(
  numbers: readonly Reported[],
  entryId: string,
  checks: Pick<SequenceChecks, 'flagsOf' | 'flags'>
): FigureFlags | null {
  if (checks.flags.size === 0) return null;
  const injections = new Set(numbers.map(({ injectionId }) => injectionId));
  const causes = new Map<string, { flag: Flag; count: number; sides: Set<Flag['side']> }>();
  let flagged = 0;
  for (const id of injections) {
    const own = checks.flagsOf(id, entryId);
    if (own.length > 0) flagged += 1;
    for (const flag of own) {
      // An internal standard is a cause in each injection; the first stands for all of the same rule.
      const key = flag.cause === 'internal standard' ? flag.rule.type : `${flag.cause} ${flag.injectionId}`;
      const known = causes.get(key) ?? { flag, count: 0, sides: new Set<Flag['side']>() };
      causes.set(key, known);
      known.count += 1;
      known.sides.add(flag.side);
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
  return `${which}: ${causes.map(causeText).join('; ')}`;
}

function causeText({ flag, count, sides }: FigureCause): string {
  if (count === 1) return flag.text;
  if (flag.cause === 'internal standard') return `${flag.text}, and outside its window in ${count - 1} more`;
  const side = sides.has('before') && sides.has('after') ? 'among' : '$1';
  return flag.text.replace(/ (before|after) it,/, ` ${side} them,`);
}
