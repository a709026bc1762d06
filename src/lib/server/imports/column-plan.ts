import type { ReportedBasis } from '../../domain/vocabulary';
import { columnLetters } from './cell-address';
import type { HeaderColumn, SheetLayout } from './find-layout';
import type { ProblemList } from './problems';
import { statedUnit } from './read-header';
import type { StatedKind } from './read-header';
import type { Expectation, RecognisedColumn } from './types';
import { unitFactor, unitKey } from './units';
import type { UnitFactor } from './units';

export interface NumberColumn {
  readonly column: number;
  readonly factor: UnitFactor;
}

export interface ValueColumn extends NumberColumn {
  readonly basis: ReportedBasis;
  /** Panel entry id in the wide layout; null in the long one, where the row names the analyte. */
  readonly analyte: string | null;
  readonly internalArea: number | null;
}

/** Which column holds what; columns are zero-based. */
export interface ColumnPlan {
  readonly sample: number;
  readonly experiment: number | null;
  readonly fraction: number | null;
  readonly analyte: number | null;
  readonly cas: number | null;
  readonly values: readonly ValueColumn[];
  readonly finalVolume: NumberColumn | null;
  readonly dilution: NumberColumn | null;
  readonly aliquotShare: NumberColumn | null;
  readonly injection: number | null;
  readonly acquiredAt: number | null;
  readonly recognised: readonly RecognisedColumn[];
}

const plain: UnitFactor = { times: 1, per: 1 };

/**
 * Decides from the headers which column is read as what, and what is left out, with a problem for everything that is
 * not plain.
 *
 * @returns null where no value column can be read; the problems say why
 */
export function planColumns(
  sheet: string,
  { columns, headerRow, titleKind }: SheetLayout,
  declared: Expectation['declared'],
  problems: ProblemList
): ColumnPlan | null {
  const at = { sheet, row: headerRow };
  const used = new Map<number, RecognisedColumn>();

  function take(
    { column, text, header }: HeaderColumn,
    meaning: RecognisedColumn['meaning'],
    analyte: string | null
  ): void {
    used.set(column, { column, header: text, meaning, unit: header.unit, panelEntryId: analyte });
  }

  function only(
    meaning: HeaderColumn['header']['meaning'],
    as: RecognisedColumn['meaning']
  ): HeaderColumn | null {
    const [first, second] = columns.filter(({ header }) => header.meaning === meaning);
    if (second && first) {
      problems.error({
        code: 'column twice',
        ...at,
        column: second.column,
        found: `“${first.text}” and “${second.text}”`,
        expected: `one column with the ${as}`,
        what: `Columns ${columnLetters(first.column)} and ${columnLetters(second.column)} both read as the ${as}.`,
        fix: 'Rename or remove the one that is not meant.'
      });
    }
    if (first) take(first, as, null);
    return first ?? null;
  }

  function withUnit(found: HeaderColumn | null, target: 'mL' | 'share'): NumberColumn | null {
    if (!found) return null;
    const unit = found.header.unit ?? statedUnit(found.text);
    const factor = unitFactor(unit ?? (target === 'mL' ? 'mL' : ''), target);
    if (!factor) {
      problems.error({
        code: 'unknown unit',
        ...at,
        column: found.column,
        found: `“${found.text}”`,
        expected: target === 'mL' ? 'mL, µL or L' : 'a share from 0 to 1, or %',
        what: `“${found.text}” is not in a unit known here for ${target === 'mL' ? 'volumes' : 'shares'}.`,
        fix: 'Give the unit in brackets behind the name, and the numbers in it.'
      });
      return null;
    }
    if (unit === null && target === 'mL') {
      problems.question({
        code: 'unit missing',
        ...at,
        column: found.column,
        found: `“${found.text}”`,
        expected: 'a unit in brackets, such as (mL)',
        what: `“${found.text}” names no unit and is read as mL. Is that right?`,
        fix: 'Confirm, or write the unit into the header.'
      });
    }
    return { column: found.column, factor };
  }

  const sample = only('sample', 'sample');
  if (!sample) return null;
  const values = planValues(sheet, headerRow, columns, titleKind, declared, problems, take);
  const plan: ColumnPlan = {
    sample: sample.column,
    experiment: only('experiment', 'experiment')?.column ?? null,
    fraction: only('fraction', 'fraction')?.column ?? null,
    analyte: only('analyte', 'analyte')?.column ?? null,
    cas: only('cas', 'cas')?.column ?? null,
    values,
    finalVolume: withUnit(only('finalVolume', 'final volume'), 'mL'),
    dilution: numberColumn(only('dilution', 'dilution')),
    aliquotShare: withUnit(only('aliquotShare', 'aliquot share'), 'share'),
    injection: only('injection', 'injection')?.column ?? null,
    acquiredAt: only('acquiredAt', 'acquired at')?.column ?? null,
    recognised: []
  };
  const recognised = columns.map(
    ({ column, text, header }): RecognisedColumn =>
      used.get(column) ?? { column, header: text, meaning: 'not used', unit: header.unit, panelEntryId: null }
  );
  return values.length === 0 ? null : { ...plan, recognised };
}

function numberColumn(found: HeaderColumn | null): NumberColumn | null {
  return found ? { column: found.column, factor: plain } : null;
}

type Take = (column: HeaderColumn, meaning: RecognisedColumn['meaning'], analyte: string | null) => void;

function planValues(
  sheet: string,
  headerRow: number,
  columns: readonly HeaderColumn[],
  titleKind: SheetLayout['titleKind'],
  declared: Expectation['declared'],
  problems: ProblemList,
  take: Take
): readonly ValueColumn[] {
  const internal = internalAreas(columns);
  const hasAreas =
    internal.size > 0 || columns.some(({ header }) => header.meaning === 'value' && header.kind === 'area');
  const isLong = columns.some(({ header }) => header.meaning === 'analyte' || header.meaning === 'cas');
  const planned: { column: HeaderColumn; analyte: string | null; basis: Basis }[] = [];
  for (const column of columns) {
    const { header } = column;
    if (header.meaning !== 'value' || (isLong ? header.analyte !== null : header.analyte === null)) continue;
    const stated =
      header.kind === 'result' && header.unit === null
        ? (titleKind ?? { kind: hasAreas ? 'area' : 'result', unit: null })
        : header;
    planned.push({
      column,
      analyte: header.analyte,
      basis: resolveBasis(stated.kind, header.unit ?? stated.unit, declared.basis)
    });
  }

  const groups = new Map<string | null, typeof planned>();
  for (const each of planned) groups.set(each.analyte, [...(groups.get(each.analyte) ?? []), each]);
  const values: ValueColumn[] = [];
  let asked = false;
  for (const [analyte, group] of groups) {
    const known = group.filter(({ basis }) => basis.kind === 'known');
    const usable =
      group.length > 1 && declared.basis !== null ? (known.length > 0 ? known : group.slice(0, 1)) : group;
    const [first, second] = usable;
    if (!first) continue;
    const { column, basis } = first;
    const at = { sheet, row: headerRow, column: column.column };
    if (second) {
      reportSeveral(at, column, second.column, bases(usable).size > 1, problems);
      continue;
    }
    if (basis.kind === 'known') {
      const internalColumn = internal.get(column.column) ?? null;
      take(column, 'value', analyte);
      if (internalColumn) take(internalColumn, 'internal area', analyte);
      values.push({
        column: column.column,
        factor: basis.factor,
        basis: basis.basis,
        analyte,
        internalArea: basis.basis === 'area' ? (internalColumn?.column ?? null) : null
      });
    } else if (basis.kind === 'contradicts') {
      problems.error({
        code: 'basis contradicts',
        ...at,
        found: `“${column.text}”`,
        expected: `numbers that are ${basisWords[basis.declared]}`,
        what: `“${column.text}” does not hold numbers that are ${basisWords[basis.declared]}, which this file was declared to bring.`,
        fix: 'Declare the basis that the header names, or correct the header.'
      });
    } else if (!asked) {
      asked = true;
      problems.question({
        code: 'basis unknown',
        ...at,
        found: `“${column.text}”`,
        expected: 'a peak area, ng/mL in the vial, ng in the whole fraction, or ng/L of sample',
        what: `“${column.text}” does not say what its numbers are: peak areas, the content of the vial, of the whole fraction, or of the sample.`,
        fix: 'Declare what this file brings; nothing is guessed.',
        answer: 'declare basis'
      });
    }
  }
  return values;
}

const basisWords: Readonly<Record<ReportedBasis, string>> = {
  area: 'peak areas',
  vial: 'ng/mL in the vial',
  ng: 'ng in the whole fraction',
  ng_per_l: 'ng/L of sample'
};

function bases(group: readonly { readonly basis: Basis }[]): ReadonlySet<string> {
  return new Set(group.map(({ basis }) => (basis.kind === 'known' ? basis.basis : basis.kind)));
}

function reportSeveral(
  at: { readonly sheet: string; readonly row: number; readonly column: number },
  first: HeaderColumn,
  second: HeaderColumn,
  differ: boolean,
  problems: ProblemList
): void {
  const found = `“${first.text}” and “${second.text}”`;
  if (differ) {
    problems.question({
      code: 'basis unknown',
      ...at,
      found,
      expected: 'one of them',
      what: `Columns ${columnLetters(first.column)} and ${columnLetters(second.column)} bring the same results in two ways, ${found}. Which one is to be stored?`,
      fix: 'Declare the basis of this file; the other column is then left out.',
      answer: 'declare basis'
    });
  } else {
    problems.error({
      code: 'column twice',
      ...at,
      column: second.column,
      found,
      expected: 'each result once',
      what: `Columns ${columnLetters(first.column)} and ${columnLetters(second.column)} hold the same kind of result for the same analyte.`,
      fix: 'Remove one of them, or name in its header what it is.'
    });
  }
}

/** Value column → its internal standard column: by the analyte in its header, else the nearest value column on its left. */
function internalAreas(columns: readonly HeaderColumn[]): ReadonlyMap<number, HeaderColumn> {
  const found = new Map<number, HeaderColumn>();
  const values = columns.filter(({ header }) => header.meaning === 'value');
  for (const column of columns) {
    const { header } = column;
    if (header.meaning !== 'internal area') continue;
    const owner =
      header.analyte === null
        ? (values.findLast(({ column: left }) => left < column.column) ?? values[0])
        : values.find(({ header: value }) => value.meaning === 'value' && value.analyte === header.analyte);
    if (owner && !found.has(owner.column)) found.set(owner.column, column);
  }
  return found;
}

type Basis =
  | { readonly kind: 'known'; readonly basis: ReportedBasis; readonly factor: UnitFactor }
  | { readonly kind: 'contradicts'; readonly declared: ReportedBasis }
  | { readonly kind: 'open' };

function resolveBasis(kind: StatedKind, unit: string | null, declared: ReportedBasis | null): Basis {
  if (kind === 'result')
    return declared ? { kind: 'known', basis: declared, factor: plain } : { kind: 'open' };
  let basis: ReportedBasis | null;
  if (kind === 'concentration') {
    if (declared === 'vial' || declared === 'ng_per_l') basis = declared;
    else basis = unit !== null && unitKey(unit) === 'ng/l' ? 'ng_per_l' : null;
  } else basis = kind;
  if (declared && (basis === null || basis !== declared)) return { kind: 'contradicts', declared };
  if (basis === null) return { kind: 'open' };
  const factor = basis === 'area' || unit === null ? plain : unitFactor(unit, basis);
  return factor ? { kind: 'known', basis, factor } : { kind: 'open' };
}
