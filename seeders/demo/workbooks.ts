import ExcelJS from 'exceljs';

/** One injection to be written down: where it belongs, and the areas that came of it. */
export interface ReportedInjection {
  readonly sample: string;
  readonly fraction: string | null;
  readonly injection: number;
  readonly finalVolumeMl: number | null;
  readonly dilution: number;
  readonly aliquotShare: number;
  /** Area by substance; null: not detected. */
  readonly areas: ReadonlyMap<string, number | null>;
  readonly standardAreas: ReadonlyMap<string, number>;
  /** "2026-10-05 16:30"; absent: the instrument gives no times. */
  readonly acquiredAt?: string;
}

/** A substance's name and the injection standard whose area stands beside its own; null: external. */
export interface ReportedSubstance {
  readonly name: string;
  readonly internalStandard: string | null;
}

type Cells = readonly (string | number | null)[];

const places = ['Sample', 'Fraction', 'Injection', 'Final volume (mL)', 'Dilution', 'Aliquot share'] as const;

/** The heads of the columns that say what an injection is; with times where the instrument gives them. */
const headsOf = (vials: readonly ReportedInjection[]): readonly string[] =>
  vials.some(({ acquiredAt }) => acquiredAt !== undefined) ? [...places, 'Acquired at'] : places;

function placeCells(vial: ReportedInjection): Cells {
  return [
    vial.sample,
    vial.fraction,
    vial.injection,
    vial.finalVolumeMl,
    vial.finalVolumeMl === null ? null : vial.dilution,
    vial.finalVolumeMl === null ? null : vial.aliquotShare,
    ...(vial.acquiredAt === undefined ? [] : [vial.acquiredAt])
  ];
}

function areaCells(vial: ReportedInjection, { name, internalStandard }: ReportedSubstance): Cells {
  const standard = internalStandard === null ? null : (vial.standardAreas.get(internalStandard) ?? null);
  return [vial.areas.get(name) ?? 'ND', standard];
}

/** One row for every injection and substance. */
function longRows(vials: readonly ReportedInjection[], substances: readonly ReportedSubstance[]): Cells[] {
  return [
    [...headsOf(vials), 'Analyte', 'Area', 'Internal standard area'],
    ...vials.flatMap((vial) =>
      substances.map((substance) => [...placeCells(vial), substance.name, ...areaCells(vial, substance)])
    )
  ];
}

/** One row for every injection, the substances across. */
function wideRows(vials: readonly ReportedInjection[], substances: readonly ReportedSubstance[]): Cells[] {
  const heads = substances.flatMap(({ name, internalStandard }) =>
    internalStandard === null ? [`${name} area`] : [`${name} area`, `${name} internal standard area`]
  );
  return [
    [...headsOf(vials), ...heads],
    ...vials.map((vial) => [
      ...placeCells(vial),
      ...substances.flatMap((substance) =>
        areaCells(vial, substance).slice(0, substance.internalStandard === null ? 1 : 2)
      )
    ])
  ];
}

/**
 * An instrument's spreadsheet as XLSX bytes: one sheet named `Areas` with a title above the table, in the long layout (one row per sample, fraction and
 * analyte) or the wide one (analytes across).
 */
export async function writeWorkbook(
  title: string,
  layout: 'long' | 'wide',
  vials: readonly ReportedInjection[],
  substances: readonly ReportedSubstance[]
): Promise<Buffer> {
  const workbook = new ExcelJS.Workbook();
  const sheet = workbook.addWorksheet('Areas', { views: [{ state: 'frozen', xSplit: 2, ySplit: 3 }] });
  const rows = layout === 'long' ? longRows(vials, substances) : wideRows(vials, substances);
  sheet.addRows([[title], [], ...rows.map((row) => [...row])]);
  sheet.getRow(3).font = { bold: true };
  sheet.columns.forEach((column) => (column.width = 16));
  return Buffer.from(await workbook.xlsx.writeBuffer());
}
