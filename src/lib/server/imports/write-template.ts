import type ExcelJS from 'exceljs';
import { markNames, markSheet, readMeSheet, templateVersion } from './template-mark';
import { fillReadMe, templateFont } from './template-read-me';
import type { CheckExpectation, Expectation, ExperimentExpectation, PanelExpectation } from './types';

export interface TemplateOptions {
  /** Shown on every sheet of a lab whose data are invented; null for real labs. */
  readonly demoLabel: string | null;
}

export type TemplateLayout = 'long' | 'wide';

interface Column {
  readonly header: string;
  readonly width: number;
  readonly validation?: Validation;
  readonly numberFormat?: string;
}

interface Validation {
  readonly type: 'decimal' | 'whole';
  readonly operator: 'greaterThan' | 'greaterThanOrEqual' | 'between';
  readonly formulae: readonly number[];
  readonly error: string;
}

const preparationColumns: readonly Column[] = [
  {
    header: 'Final volume (mL)',
    width: 16,
    validation: {
      type: 'decimal',
      operator: 'greaterThan',
      formulae: [0],
      error: 'A final volume is above 0 mL.'
    }
  },
  {
    header: 'Dilution',
    width: 10,
    validation: {
      type: 'decimal',
      operator: 'greaterThanOrEqual',
      formulae: [1],
      error: 'A vial diluted ten times over has a dilution of 10; an undiluted one has 1.'
    }
  },
  {
    header: 'Aliquot share',
    width: 13,
    validation: {
      type: 'decimal',
      operator: 'between',
      formulae: [0, 1],
      error: 'The share of the fraction that is in this extract is above 0 and at most 1.'
    }
  },
  {
    header: 'Injection',
    width: 10,
    validation: {
      type: 'whole',
      operator: 'greaterThanOrEqual',
      formulae: [1],
      error: 'Injections are numbered 1, 2, 3 …'
    }
  },
  { header: 'Acquired at', width: 18, numberFormat: 'yyyy-mm-dd hh:mm' }
];

/**
 * The data template of one experiment: a row for every sample, fraction and analyte (long), or for every sample and
 * fraction with a column for each analyte (wide), to be filled with peak areas, between the checks of its calibration set. It carries the experiment's id, by which its import
 * recognises it.
 *
 * @throws RangeError when the expectation has no such experiment
 */
export async function writeTemplate(
  expectation: Expectation,
  experimentId: string,
  layout: TemplateLayout,
  { demoLabel }: TemplateOptions = { demoLabel: null }
): Promise<Buffer> {
  const experiment = expectation.experiments.find(({ id }) => id === experimentId);
  if (!experiment) throw new RangeError(`The expectation has no experiment ${experimentId}`);
  // Large and slow to load: pages that only speak of templates do without it.
  const { default: excel } = await import('exceljs');
  const workbook = new excel.Workbook();
  const results = workbook.addWorksheet('Results');
  const title = demoLabel === null ? experiment.title : `${experiment.title} (${demoLabel})`;
  results.addRow([title]).font = { ...templateFont, bold: true, size: 13 };
  results.addRow([
    'Fill in what was measured. The sheet “Read me” says what empty cells, ND, <x and >x mean.'
  ]);
  const injected = runOf(
    experiment,
    expectation.calibrationSets.find(({ id }) => id === experiment.calibrationSetId)?.checks ?? []
  );
  const { columns, rows } =
    layout === 'long' ? longTable(injected, expectation.panel) : wideTable(injected, expectation.panel);
  addTable(results, columns, rows);
  fillReadMe(workbook.addWorksheet(readMeSheet), { experiment, panel: expectation.panel, layout, demoLabel });
  addMark(workbook, experimentId, layout);
  return Buffer.from(await workbook.xlsx.writeBuffer());
}

type Row = readonly (string | number | null)[];

interface Table {
  readonly columns: readonly Column[];
  readonly rows: readonly Row[];
}

interface ExtractRow {
  readonly sample: string;
  /** Standards have none. */
  readonly fraction: string | null;
}

function extractsOf(experiment: ExperimentExpectation): readonly ExtractRow[] {
  return experiment.replicates.flatMap(({ label, takesFraction }): readonly ExtractRow[] =>
    takesFraction
      ? experiment.fractions.map(({ name }) => ({ sample: label, fraction: name }))
      : [{ sample: label, fraction: null }]
  );
}

/** The extracts between the checks that are on record: all of them before, the continuing ones after as well. */
function runOf(
  experiment: ExperimentExpectation,
  checks: readonly CheckExpectation[]
): readonly ExtractRow[] {
  const rowsOf = (...kinds: readonly CheckExpectation['kind'][]): readonly ExtractRow[] =>
    kinds.flatMap((kind) =>
      checks.filter((check) => check.kind === kind).map(({ name }) => ({ sample: name, fraction: null }))
    );
  return [
    ...rowsOf('second source', 'instrument blank', 'continuing'),
    ...extractsOf(experiment),
    ...rowsOf('continuing')
  ];
}

function longTable(injected: readonly ExtractRow[], panel: readonly PanelExpectation[]): Table {
  const names = new Map(panel.map(({ id, name }) => [id, name]));
  // Standards that are added for the instrument have their area beside each analyte they calibrate.
  const entries = panel.filter(({ role }) => role !== 'injection internal standard');
  return {
    columns: [
      { header: 'Sample', width: 18 },
      { header: 'Fraction', width: 20 },
      { header: 'Analyte', width: 28 },
      { header: 'Area', width: 14 },
      { header: 'Internal standard', width: 24 },
      { header: 'Internal standard area', width: 20 },
      ...preparationColumns
    ],
    rows: injected.flatMap(({ sample, fraction }) =>
      entries.map(({ name, internalStandard }): Row => [
        sample,
        fraction,
        name,
        null,
        internalStandard ? (names.get(internalStandard.panelEntryId) ?? null) : null,
        null,
        null,
        null,
        null,
        1,
        null
      ])
    )
  };
}

function wideTable(injected: readonly ExtractRow[], panel: readonly PanelExpectation[]): Table {
  return {
    columns: [
      { header: 'Sample', width: 18 },
      { header: 'Fraction', width: 20 },
      ...preparationColumns,
      ...panel.map(({ name }) => ({ header: `${name} area`, width: Math.max(14, name.length + 6) }))
    ],
    rows: injected.map(({ sample, fraction }): Row => [sample, fraction, null, null, null, 1, null])
  };
}

function addTable(sheet: ExcelJS.Worksheet, columns: readonly Column[], rows: readonly Row[]): void {
  const header = sheet.addRow(columns.map((column) => column.header));
  header.eachCell((cell) => {
    cell.font = { ...templateFont, bold: true };
    cell.alignment = { wrapText: true, vertical: 'bottom' };
    cell.border = { bottom: { style: 'thin' } };
  });
  for (const row of rows) sheet.addRow([...row]);
  const first = header.number + 1;
  // Some room below, for further injections and calibration levels.
  const last = header.number + rows.length + 500;
  columns.forEach((column, index) => {
    const sheetColumn = sheet.getColumn(index + 1);
    sheetColumn.width = column.width;
    const range = `${sheetColumn.letter}${first}:${sheetColumn.letter}${last}`;
    if (column.validation) validate(sheet, range, column.validation);
    if (column.numberFormat) sheetColumn.numFmt = column.numberFormat;
  });
  sheet.views = [{ state: 'frozen', xSplit: 2, ySplit: header.number, topLeftCell: `C${first}` }];
  sheet.pageSetup = { orientation: 'landscape', fitToPage: true, fitToWidth: 1, fitToHeight: 0 };
}

/** The library takes rules for ranges, but its types know those of single cells only. */
interface RangeValidations {
  readonly dataValidations: { add(range: string, rule: ExcelJS.DataValidation): void };
}

function validate(
  sheet: ExcelJS.Worksheet,
  range: string,
  { type, operator, formulae, error }: Validation
): void {
  (sheet as unknown as RangeValidations).dataValidations.add(range, {
    type,
    operator,
    formulae: [...formulae],
    allowBlank: true,
    showErrorMessage: true,
    errorStyle: 'stop',
    errorTitle: 'Please look again',
    error
  });
}

function addMark(workbook: ExcelJS.Workbook, experimentId: string, layout: TemplateLayout): void {
  const sheet = workbook.addWorksheet(markSheet, { state: 'veryHidden' });
  sheet.addRow([markNames.version, templateVersion]);
  sheet.addRow([markNames.experiment, experimentId]);
  sheet.addRow([markNames.layout, layout]);
}
