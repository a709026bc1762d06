import type { ValidationView } from '../../views/validation';
import { csvText, type CsvCell } from './csv';
import type { CsvAbout } from './findings-csv';
import { validationLines } from './validation-lines';

/** A validation as CSV, one figure a row, unrounded; invented data say so in every row. */
export function validationCsv(view: ValidationView, about: CsvAbout): string {
  const heads = [
    'Study',
    'Variant',
    'Part',
    'Rests on',
    'Table',
    'Analyte',
    'Figure',
    'Value',
    'Unit',
    'Verdict',
    'Why',
    'Lab'
  ];
  const lab = about.labIsDemo ? `${about.labName} (invented demo data)` : about.labName;
  return csvText(
    heads,
    validationLines(view).map((line): CsvCell[] => [
      about.study,
      view.variant?.code ?? null,
      line.part,
      line.evidence,
      line.table,
      line.name,
      line.figure,
      line.value,
      line.unit,
      line.verdict,
      line.why,
      lab
    ])
  );
}
