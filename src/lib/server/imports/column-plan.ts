import type { ReportedBasis } from '../../domain/vocabulary';
import type { ColumnMeaning, MapColumn, Orientation } from '../../schemas/column-map';
import { linesInWords } from './cell-address';
import type { NameMatcher } from './name-matcher';
import { planValues } from './plan-values';
import type { Problems } from './problems';
import { statedUnit } from './read-header';
import type { Expectation, RecognisedColumn } from './types';
import { unchanged, unitFactor } from './units';
import type { UnitFactor } from './units';

export interface NumberColumn {
  readonly column: number;
  readonly factor: UnitFactor;
}

/** The columns beside a value that tell of its peak. */
export interface QualifierColumns {
  readonly retentionTime: NumberColumn | null;
  readonly ionRatio: NumberColumn | null;
  readonly signalToNoise: number | null;
  readonly manualIntegration: number | null;
  readonly manualCause: number | null;
}

export interface ValueColumn extends NumberColumn {
  readonly basis: ReportedBasis;
  /** Panel entry id where the column is about one analyte; null where the row, the sheet or a title names it. */
  readonly analyte: string | null;
  readonly internalArea: number | null;
  /** In the unit of the value, or in one that its header names. */
  readonly limit: NumberColumn | null;
  /** null: none of them. */
  readonly qualifiers: QualifierColumns | null;
}

/** Which column holds what; columns are zero-based. */
export interface ColumnPlan {
  /** null: the sheet, a title or a block names it for all rows. The same goes for the analyte. */
  readonly sample: number | null;
  readonly experiment: number | null;
  readonly fraction: number | null;
  readonly analyte: number | null;
  readonly cas: number | null;
  readonly values: readonly ValueColumn[];
  readonly finalVolume: NumberColumn | null;
  readonly dilution: NumberColumn | null;
  readonly aliquotShare: NumberColumn | null;
  readonly sampleVolume: NumberColumn | null;
  readonly sampleMass: NumberColumn | null;
  readonly injection: number | null;
  readonly acquiredAt: number | null;
  readonly recognised: readonly RecognisedColumn[];
}

/** A column of the map with its analyte found on the panel. */
export interface PlannedColumn extends Omit<MapColumn, 'analyte'> {
  /** Panel entry id. */
  readonly analyte: string | null;
}

export interface PlanContext {
  readonly sheet: string;
  readonly orientation: Orientation;
  readonly headerRow: number;
  readonly analytes: NameMatcher<string>;
  readonly declared: Expectation['declared'];
  readonly problems: Problems;
}

export type Take = (column: PlannedColumn, as: RecognisedColumn['meaning']) => void;

/**
 * Turns the columns of a map into what the rows are read by, with a problem for everything that is not plain.
 *
 * @returns null where no value column can be read; the problems say why
 */
export function planColumns(columns: readonly MapColumn[], context: PlanContext): ColumnPlan | null {
  const { sheet, headerRow, problems } = context;
  const at = { sheet, row: headerRow };
  const used = new Map<number, RecognisedColumn>();
  const known = columns.map((column) => onPanel(column, context));

  function take({ column, header, unit, analyte }: PlannedColumn, as: RecognisedColumn['meaning']): void {
    used.set(column, { column, header, meaning: as, unit, panelEntryId: analyte });
  }

  function only(means: ColumnMeaning & RecognisedColumn['meaning']): PlannedColumn | null {
    const [first, second] = known.filter((column) => column.means === means);
    if (second && first) {
      problems.error({
        code: 'column twice',
        ...at,
        column: second.column,
        found: `“${first.header}” and “${second.header}”`,
        expected: `one column with the ${means}`,
        what: `${linesInWords(context.orientation === 'analytes down', first.column, second.column)} both read as the ${means}.`,
        fix: 'Rename or remove the one that is not meant.'
      });
    }
    if (first) take(first, means);
    return first ?? null;
  }

  const values = planValues(known, context, take);
  const plan: ColumnPlan = {
    sample: only('sample')?.column ?? null,
    experiment: only('experiment')?.column ?? null,
    fraction: only('fraction')?.column ?? null,
    analyte: only('analyte')?.column ?? null,
    cas: only('cas')?.column ?? null,
    values,
    finalVolume: withUnit(only('final volume'), 'mL', context),
    dilution: numberColumn(only('dilution')),
    aliquotShare: withUnit(only('aliquot share'), 'share', context),
    sampleVolume: withUnit(only('sample volume'), 'mL', context),
    sampleMass: withUnit(only('sample mass'), 'g', context),
    injection: only('injection')?.column ?? null,
    acquiredAt: only('acquired at')?.column ?? null,
    recognised: []
  };
  const recognised = known.map(
    ({ column, header, unit }): RecognisedColumn =>
      used.get(column) ?? { column, header, meaning: 'not used', unit, panelEntryId: null }
  );
  return values.length === 0 ? null : { ...plan, recognised };
}

function onPanel(column: MapColumn, { sheet, headerRow, analytes, problems }: PlanContext): PlannedColumn {
  if (column.analyte === null || column.means === 'ignored' || column.means === 'not understood')
    return { ...column, analyte: null };
  const match = analytes.match(column.analyte);
  if (match.kind === 'one') return { ...column, analyte: match.value };
  problems.error({
    code: match.kind === 'many' ? 'ambiguous analyte' : 'unknown analyte',
    sheet,
    row: headerRow,
    column: column.column,
    found: `“${column.analyte}”`,
    expected: 'a name, synonym or CAS number of the panel',
    what:
      match.kind === 'many'
        ? `“${column.analyte}” can be more than one analyte of the panel.`
        : `This column is read as ${column.analyte}, which is not on the panel.`,
    fix: 'Choose the analyte anew, add it to the panel, or leave the column out.'
  });
  return { ...column, means: 'ignored', analyte: null };
}

function withUnit(
  found: PlannedColumn | null,
  target: 'mL' | 'share' | 'g',
  { sheet, headerRow, problems }: PlanContext
): NumberColumn | null {
  if (!found) return null;
  const at = { sheet, row: headerRow, column: found.column, found: `“${found.header}”` };
  const unit = found.unit ?? statedUnit(found.header);
  const factor = unitFactor(unit ?? (target === 'share' ? '' : target), target);
  const words = { mL: 'mL, µL or L', share: 'a share from 0 to 1, or %', g: 'g, mg or kg' };
  if (!factor) {
    const what = { mL: 'volumes', share: 'shares', g: 'masses' };
    problems.error({
      code: 'unknown unit',
      ...at,
      expected: words[target],
      what: `“${found.header}” is not in a unit known here for ${what[target]}.`,
      fix: 'Give the unit in brackets behind the name, and the numbers in it.'
    });
    return null;
  }
  if (unit === null && target !== 'share') {
    problems.question({
      code: 'unit missing',
      ...at,
      expected: `a unit in brackets, such as (${target})`,
      what: `“${found.header}” names no unit and is read as ${target}. Is that right?`,
      fix: 'Confirm, or write the unit into the header.'
    });
  }
  return { column: found.column, factor };
}

function numberColumn(found: PlannedColumn | null): NumberColumn | null {
  return found ? { column: found.column, factor: unchanged } : null;
}
