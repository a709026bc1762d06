import type { CompareView, SubjectView } from '../../views/findings';
import type { MassBalanceView } from '../../views/mass-balance';
import type { WalkBackView } from '../../views/walk-back';
import { csvText, type CsvCell } from './csv';

export interface CsvAbout {
  readonly study: string;
  readonly labName: string;
  readonly labIsDemo: boolean;
}

/** Invented data say so in every row, wherever a row is copied to. */
export const labText = ({ labName, labIsDemo }: CsvAbout): string =>
  labIsDemo ? `${labName} (invented demo data)` : labName;

/** A mass balance as CSV, figures unrounded: the judged part, each fraction, what was lost downstream, what is open. */
export function balanceCsv(view: MassBalanceView, subject: SubjectView, about: CsvAbout): string {
  const heads = [
    'Study',
    'Experiment',
    'Analyte',
    'Class',
    'n',
    'Method recovery (%)',
    'Half-width of the 95 % interval (points)',
    'RSD (%)',
    'Verdict',
    'Reasons',
    ...view.fractions.map(
      ({ name, countsAs }) =>
        `${name} (% of the spike, ${countsAs === 'method' ? 'in the extract' : 'elsewhere'})`
    ),
    'Lost downstream (points)',
    'Open (points)',
    'Open differs from zero',
    'Found in all (%)',
    'Incomplete',
    'Lab'
  ];
  return csvText(
    heads,
    view.rows.map((row): CsvCell[] => [
      about.study,
      subject.experiment?.number ?? null,
      row.name,
      row.class,
      row.method?.n ?? null,
      row.method?.mean ?? null,
      row.method?.halfWidth ?? null,
      row.method?.rsd ?? null,
      row.verdict ?? 'no verdict',
      row.reasons.join('; '),
      ...view.fractions.map(
        ({ key }) => row.segments.find(({ fractionKey }) => fractionKey === key)?.mean ?? null
      ),
      row.downstream,
      row.open,
      row.open === null ? null : row.openSignificant ? 'yes' : 'no',
      row.total,
      row.incomplete,
      labText(about)
    ])
  );
}

/** A walk-back as CSV, figures unrounded: what each stage takes of 100 in the sample, in procedure order. */
export function walkBackCsv(view: WalkBackView, subject: SubjectView, about: CsvAbout): string {
  const heads = [
    'Study',
    'Variant',
    'Analyte',
    ...view.stages.flatMap(({ name }) => [
      `${name} takes (points)`,
      `${name}, lower 95 % bound (points)`,
      `${name}, upper 95 % bound (points)`,
      `${name}, adjusted p`
    ]),
    'Left (%)',
    'Note',
    'Lab'
  ];
  return csvText(
    heads,
    view.rows.map((row): CsvCell[] => [
      about.study,
      subject.variant?.code ?? null,
      row.name,
      ...view.stages.flatMap((_, index): CsvCell[] => {
        const loss = row.losses[index] ?? null;
        return [
          loss?.lost ?? null,
          loss?.interval?.lower ?? null,
          loss?.interval?.upper ?? null,
          loss?.pAdjusted ?? null
        ];
      }),
      row.remaining,
      row.gap,
      labText(about)
    ])
  );
}

/** Variants compared as CSV, figures unrounded: a row for each analyte in each variant. */
export function compareCsv(view: CompareView, about: CsvAbout): string {
  const heads = [
    'Study',
    'Analyte',
    'Class',
    'Variant',
    'Variant name',
    'Experiment',
    'n',
    'Method recovery (%)',
    'Half-width of the 95 % interval (points)',
    'Verdict',
    'Reasons',
    'Lab'
  ];
  return csvText(
    heads,
    view.rows.flatMap((row) =>
      view.variants.map((variant, index): CsvCell[] => {
        const cell = row.cells[index] ?? null;
        return [
          about.study,
          row.name,
          row.class,
          variant.code,
          variant.name,
          variant.experiment?.number ?? null,
          cell?.n ?? null,
          cell?.mean ?? null,
          cell?.halfWidth ?? null,
          cell === null ? null : (cell.verdict ?? 'no verdict'),
          cell ? [cell.reason, cell.flagged].filter(Boolean).join('; ') : (row.gaps[index] ?? null),
          labText(about)
        ];
      })
    )
  );
}
