import type { PartEvidence, ValidationView } from '../../views/validation';

/** One figure of a validation in a line of its own, as files hold it. */
export interface ValidationLine {
  readonly part: string;
  /** "experiments 2, 3, chosen" */
  readonly evidence: string;
  readonly table: string;
  readonly name: string;
  readonly href: string | null;
  readonly figure: string;
  readonly value: number | string | null;
  readonly unit: string | null;
  readonly verdict: string | null;
  readonly why: string;
}

/** Every figure of every table, in the order of the page; empty cells are left out. */
export function validationLines(view: ValidationView): ValidationLine[] {
  return view.parts.flatMap((part) =>
    part.tables.flatMap((table) =>
      table.rows.flatMap((row) =>
        table.columns.flatMap((column, index) => {
          const value = row.cells[index]?.value ?? null;
          return value === null
            ? []
            : [
                {
                  part: part.title,
                  evidence: evidenceText(part.evidence),
                  table: table.caption,
                  name: row.name,
                  href: row.href,
                  figure: column.label,
                  value,
                  unit: column.unit,
                  verdict: table.judged ? (row.verdict ?? 'no verdict') : null,
                  why: row.why
                }
              ];
        })
      )
    )
  );
}

/** "experiments 2, 3, suggested and not chosen" */
export function evidenceText(evidence: PartEvidence | null): string {
  if (!evidence || evidence.state === 'none') return '';
  const numbers = evidence.experiments.map(({ number }) => number).join(', ');
  const how = evidence.state === 'chosen' ? 'chosen' : 'suggested, not chosen';
  return `experiment${evidence.experiments.length === 1 ? '' : 's'} ${numbers}, ${how}`;
}
