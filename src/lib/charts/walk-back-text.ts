import { percentText } from '$lib/domain/figure-text';
import type { WalkBackLoss, WalkBackRow, WalkBackView } from '$lib/views/walk-back';

/** A loss with its interval: "12.1 (8.2 to 16.0)". */
export function lossText({ lost, interval }: WalkBackLoss): string {
  return interval === null
    ? percentText(lost)
    : `${percentText(lost)} (${percentText(interval.lower)} to ${percentText(interval.upper)})`;
}

/** A row as it is read aloud. */
export function walkBackSentence(row: WalkBackRow, stages: WalkBackView['stages']): string {
  const parts = stages.map(({ name }, index) => {
    const loss = row.losses[index] ?? null;
    return loss === null ? `${name} not known` : `${name} takes ${lossText(loss)}`;
  });
  const left = row.remaining === null ? [] : [`${percentText(row.remaining)} of 100 left`];
  return `${row.name}: ${[...parts, ...left].join(', ')}${row.gap === null ? '' : `; ${row.gap}`}`;
}

export interface WalkBackNote {
  readonly text: string;
  readonly names: readonly string[];
}

/** What the rows cannot show, each reason once with the analytes it holds for; what holds for all is not a list of names. */
export function walkBackNotes({ rows }: WalkBackView): readonly WalkBackNote[] {
  const names = new Map<string, string[]>();
  for (const { gap, name } of rows) {
    if (gap !== null) names.set(gap, [...(names.get(gap) ?? []), name]);
  }
  return [...names].map(([text, found]) => ({
    text,
    names: found.length > 1 && found.length === rows.length ? [`All ${rows.length} analytes`] : found
  }));
}
