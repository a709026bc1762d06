import type { PartEvidence, ValidationPart, ValidationView } from '$lib/views/validation';

/** A part of the validation as the summary's page shows it; its figures are on the page of their own. */
export interface SummaryPart extends Pick<ValidationPart, 'key' | 'title' | 'missing' | 'counts'> {
  readonly evidence: Pick<PartEvidence, 'state' | 'sentence' | 'experiments'> | null;
  readonly rows: number;
}

export function summaryParts(view: ValidationView): SummaryPart[] {
  return view.parts
    .filter(({ key, tables }) => key !== 'horwitz' || tables.length > 0)
    .map(({ key, title, missing, counts, evidence, tables }) => ({
      key,
      title,
      missing,
      counts,
      evidence: evidence && {
        state: evidence.state,
        sentence: evidence.sentence,
        experiments: evidence.experiments
      },
      rows: tables.reduce((sum, table) => sum + table.rows.length, 0)
    }));
}
