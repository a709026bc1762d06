import type ExcelJS from 'exceljs';
import type { ExperimentExpectation, PanelExpectation } from './types';

export interface ReadMeContent {
  readonly experiment: ExperimentExpectation;
  readonly panel: readonly PanelExpectation[];
  readonly layout: 'long' | 'wide';
  readonly demoLabel: string | null;
}

/** Named, since programs fall back to different fonts where a bold one has no name. */
export const templateFont = { name: 'Calibri', family: 2, size: 11 } as const;

const meanings: readonly (readonly [string, string])[] = [
  [
    'an empty cell, -, n/a',
    'Nothing was measured: the value is missing. This is never taken for not detected.'
  ],
  ['ND, n.d.', 'Not detected. The lowest calibration level is its limit; without one, the import asks.'],
  ['<0.5', 'Not detected, with 0.5 as its limit, in the unit of the column.'],
  ['>500, >max', 'Above the calibrated range: not used until the diluted extract is injected again.'],
  ['0', 'The number zero, not the same as not detected.'],
  ['a failed formula (#N/A)', 'An error: the import names the cell and stores nothing.']
];

const columnNotes: readonly (readonly [string, string])[] = [
  [
    'Sample',
    'The label of the replicate, or the name of a calibration level or check: add a row for each injection of one. A check whose row stays empty was not run.'
  ],
  ['Fraction', 'The name of the fraction; empty for standards.'],
  [
    'Final volume (mL)',
    'Of the whole final extract of this fraction. Once per sample and fraction is enough.'
  ],
  [
    'Dilution',
    'How many times over the vial was diluted from that extract: 10 for 100 µL made up to 1 mL. Empty means 1.'
  ],
  [
    'Aliquot share',
    'Which part of the fraction the extract holds, above 0 and at most 1. Empty means all of it (1).'
  ],
  ['Injection', 'Repeated injections of one vial are numbered 1, 2, 3; each is a row of its own.'],
  ['Acquired at', 'Date and time of the injection, if wanted.']
];

/** Writes what the template expects and what each way of filling a cell means. */
export function fillReadMe(
  sheet: ExcelJS.Worksheet,
  { experiment, panel, layout, demoLabel }: ReadMeContent
): void {
  sheet.getColumn(1).width = 28;
  sheet.getColumn(2).width = 90;
  sheet.getColumn(2).alignment = { wrapText: true, vertical: 'top' };
  sheet.getColumn(1).alignment = { vertical: 'top' };
  sheet.pageSetup = { fitToPage: true, fitToWidth: 1, fitToHeight: 0 };

  function heading(text: string): void {
    sheet.addRow([]);
    sheet.addRow([text]).font = { ...templateFont, bold: true };
  }

  sheet.addRow([`How to fill in the template of ${experiment.title}`]).font = {
    ...templateFont,
    bold: true,
    size: 13
  };
  if (demoLabel !== null) sheet.addRow([demoLabel]);
  sheet.addRow(['Experiment id', experiment.id]);
  sheet.addRow([
    '',
    'The import recognises the experiment by it. Another experiment has a template of its own.'
  ]);
  heading('What a cell means');
  for (const row of meanings) sheet.addRow([...row]);
  sheet.addRow([
    '1234.5 or 1234,5',
    'Both are read. A text such as 1,234 that could be either is asked about.'
  ]);
  heading('Columns');
  for (const row of columnNotes) sheet.addRow([...row]);
  sheet.addRow(
    layout === 'long'
      ? [
          'Internal standard area',
          'Peak area of the internal standard in the same injection, where the column before names one.'
        ]
      : [
          '… area',
          'Peak areas, internal standards included: each analyte finds the area of its standard in the same row.'
        ]
  );
  heading('Internal standards');
  const names = new Map(panel.map(({ id, name }) => [id, name]));
  for (const { name, internalStandard } of panel) {
    if (internalStandard)
      sheet.addRow([name, `is calibrated with ${names.get(internalStandard.panelEntryId) ?? 'a standard'}`]);
  }
  if (panel.every(({ internalStandard }) => !internalStandard))
    sheet.addRow(['', 'None: all analytes are calibrated externally.']);
}
