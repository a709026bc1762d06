import type { PanelChemistryView, PhRangeView } from '../../views/panel-chemistry';
import { csvText, type CsvCell } from './csv';
import { labText, type CsvAbout } from './findings-csv';

const several = (values: readonly number[]): string => values.join('; ');
/** Ranges as "0 to 2.914"; several are parted by semicolons. */
const rangesCell = (ranges: readonly PhRangeView[]): string =>
  ranges.map(({ low, high }) => `${low} to ${high}`).join('; ');

/** The chemistry of a panel as CSV, figures unrounded: a row for each analyte that is extracted, by group. */
export function chemistryCsv(view: PanelChemistryView, about: CsvAbout): string {
  const heads = [
    'Study',
    'Analyte',
    'Role',
    'Class',
    'Group',
    'Rests on',
    'Also',
    'pKa, acid groups',
    'pKa, base groups',
    'log Kow',
    'log Kow is',
    'Source of log Kow',
    'pH',
    'Neutral at this pH (%)',
    'Mostly',
    'log D at this pH',
    'At least 99 % neutral (pH)',
    'At least 99 % charged (pH)',
    'Lab'
  ];
  return csvText(
    heads,
    view.groups.flatMap(({ title, rows }) =>
      rows.map((row): CsvCell[] => [
        about.study,
        row.name,
        row.role,
        row.class,
        title,
        row.evidence,
        row.also.join('; '),
        several(row.pkaAcid),
        several(row.pkaBase),
        row.logKow?.value ?? null,
        row.logKow && (row.logKow.basis === 'predicted' ? 'predicted' : "the library's"),
        row.logKow?.source ?? null,
        view.ph,
        row.neutral === null ? null : row.neutral * 100,
        row.charge === null ? 'not known' : row.charge === 'none' ? 'neutral' : row.charge,
        row.logD,
        row.unknown === null ? rangesCell(row.neutralRanges) || 'none' : null,
        row.unknown === null ? rangesCell(row.chargedRanges) || 'none' : null,
        labText(about)
      ])
    )
  );
}
