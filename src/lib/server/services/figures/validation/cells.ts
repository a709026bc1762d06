import { figureText, percentText } from '../../../../domain/figure-text';
import { dayText } from '../../../../domain/moment-text';
import type {
  ValidationCell,
  ValidationColumn,
  ValidationPart,
  ValidationRow
} from '../../../../views/validation';
import type { Verdict } from '../../../../views/verdict';
import type { Coverage, Preparation } from '../../../amounts/validation/preparations';
import { plainEnd } from '../figure-parts';

export const column = (key: string, label: string, unit: string | null = null): ValidationColumn => ({
  key,
  label,
  unit,
  numeric: true
});
export const textColumn = (key: string, label: string): ValidationColumn => ({
  key,
  label,
  unit: null,
  numeric: false
});

export const none: ValidationCell = { value: null, text: null };
export const count = (value: number): ValidationCell => ({ value, text: String(value) });
export const words = (text: string | null): ValidationCell => ({ value: text, text });
export const percent = (value: number | null, limits: readonly number[] = []): ValidationCell =>
  value === null ? none : { value, text: percentText(value, limits) };
export const figure = (value: number | null, digits = 3): ValidationCell =>
  value === null ? none : { value, text: figureText(value, digits) };

const severity: Readonly<Record<Verdict, number>> = { outside: 0, watch: 1, 'too few': 2, inside: 4 };

/** Worst first: by verdict, then by what stands in `worst` (the larger the worse), then in panel order. */
export function worstFirst(
  rows: readonly (ValidationRow & { readonly worst: number | null })[]
): ValidationRow[] {
  const rank = (row: ValidationRow): number => (row.verdict === null ? 3 : severity[row.verdict]);
  return [...rows]
    .sort((a, b) => rank(a) - rank(b) || (b.worst ?? -Infinity) - (a.worst ?? -Infinity) || 0)
    .map(({ worst: _worst, ...row }) => row);
}

export function countsOf(tables: ValidationPart['tables']): ValidationPart['counts'] {
  const counts = { inside: 0, watch: 0, outside: 0, 'too few': 0 };
  for (const table of tables) {
    if (!table.judged) continue;
    for (const { verdict } of table.rows) if (verdict !== null) counts[verdict] += 1;
  }
  return counts;
}

/** "9 spiked preparations, 3 batches (a; b; c), 3 dates (26 Oct 2026, …)" */
export function coverageText(what: string, coverage: Coverage): string {
  const { n, batches, days, withoutDay } = coverage;
  const plural = (count: number, one: string, several = `${one}s`): string =>
    `${count} ${count === 1 ? one : several}`;
  return [
    plural(n, what),
    `${plural(batches.length, 'batch', 'batches')}${batches.length > 0 ? ` (${batches.join('; ')})` : ''}`,
    `${plural(days.length, 'date')}${days.length > 0 ? ` (${days.map(dayText).join(', ')})` : ''}`,
    ...(withoutDay > 0 ? [`${withoutDay} without a date`] : [])
  ].join(', ');
}

/** What was set aside or is incomplete among preparations, each once with its cause. */
export function leftOut(preparations: readonly Preparation[]): string[] {
  return preparations.flatMap(({ portion, found }) => {
    const { label } = portion.replicate;
    if (portion.exclusion)
      return [`${label} is set aside and not counted: ${plainEnd(portion.exclusion.cause)}`];
    return found.state === 'incomplete'
      ? [`${label} is incomplete and not counted: ${plainEnd(found.reason)}`]
      : [];
  });
}

/**
 * Notes over a panel: one that holds for several analytes is said once, with the count; no more than a handful in all.
 * @param notes name of the analyte and what is to be said
 */
export function notesOver(
  notes: readonly (readonly [name: string, note: string])[],
  total: number
): string[] {
  const by = new Map<string, string[]>();
  for (const [name, note] of notes) by.set(note, [...(by.get(note) ?? []), name]);
  const lines = [...by].map(([note, names]) => {
    const who =
      names.length === total && total > 1
        ? 'All analytes'
        : names.length > 3
          ? `${names.slice(0, 3).join(', ')} and ${names.length - 3} more`
          : names.join(', ');
    return `${who}: ${plainEnd(note)}.`;
  });
  return lines.length > 8
    ? [...lines.slice(0, 8), `And ${lines.length - 8} more of the kind; each stands at its figure.`]
    : lines;
}
