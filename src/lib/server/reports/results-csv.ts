import type { ResultsTableView } from '../../views/findings';
import { csvText } from './csv';

interface About {
  readonly study: string;
  readonly labName: string;
  readonly labIsDemo: boolean;
}

/** The method recoveries of one experiment as CSV, figures unrounded; invented data say so in a column of their own. */
export function resultsCsv(view: ResultsTableView, about: About): string {
  const heads = [
    'Study',
    'Experiment',
    'Analyte',
    'Class',
    'n',
    'Mean recovery (%)',
    'Lower 95 % bound (%)',
    'Upper 95 % bound (%)',
    'SD (points)',
    'RSD (%)',
    'Subtracted (% of the spike)',
    'Verdict',
    'Reasons',
    'Criteria',
    'Relative recovery (%)',
    'Notes',
    'Flagged',
    'Lab'
  ];
  const lab = about.labIsDemo ? `${about.labName} (invented demo data)` : about.labName;
  return csvText(
    heads,
    view.rows.map((row) => [
      about.study,
      view.experiment.number,
      row.name,
      row.class,
      row.n,
      row.mean,
      row.interval?.lower ?? null,
      row.interval?.upper ?? null,
      row.sd,
      row.rsd,
      row.subtracted,
      row.verdict ?? 'no verdict',
      row.reasons.join('; '),
      row.criteria,
      row.relative?.mean ?? null,
      [...row.notes, ...view.notes].join('; '),
      row.flagged,
      lab
    ])
  );
}
