import type { ReportedBasis } from '../../domain/vocabulary';
import { besideMeanings } from '../../schemas/column-map';
import { linesInWords } from './cell-address';
import type {
  NumberColumn,
  PlanContext,
  PlannedColumn,
  QualifierColumns,
  Take,
  ValueColumn
} from './column-plan';
import { isAmount, isConcentration, unchanged, unitFactor, unitKey } from './units';
import type { UnitFactor } from './units';

/** Decides which columns bring the results, and in what they are; where that is open, asks. */
export function planValues(
  columns: readonly PlannedColumn[],
  context: PlanContext,
  take: Take
): readonly ValueColumn[] {
  const { sheet, orientation, headerRow, declared, problems } = context;
  const planned = columns
    .filter(({ means }) => means === 'area' || means === 'amount')
    .filter(({ analyte }) => (orientation === 'long') === (analyte === null))
    .map((column) => ({ column, basis: resolveBasis(column, declared.basis) }));
  const beside = attachments(columns);

  const groups = new Map<string | null, typeof planned>();
  for (const each of planned) {
    const group = groups.get(each.column.analyte);
    if (group) group.push(each);
    else groups.set(each.column.analyte, [each]);
  }
  const values: ValueColumn[] = [];
  let asked = false;
  for (const group of groups.values()) {
    const known = group.filter(({ basis }) => basis.kind === 'known');
    const usable =
      group.length > 1 && declared.basis !== null ? (known.length > 0 ? known : group.slice(0, 1)) : group;
    const [first, second] = usable;
    if (!first) continue;
    const { column, basis } = first;
    const at = { sheet, row: headerRow, column: column.column };
    if (second) {
      const kinds = new Set(
        usable.map(({ basis: each }) => (each.kind === 'known' ? each.basis : each.kind))
      );
      reportSeveral(column, second.column, kinds.size > 1, context);
      continue;
    }
    if (basis.kind === 'known') {
      values.push(valueColumn(column, basis, beside.get(column.column) ?? {}, take));
    } else if (basis.kind === 'contradicts') {
      problems.error({
        code: 'basis contradicts',
        ...at,
        found: `“${column.header}”`,
        expected: `numbers that are ${basisWords[basis.declared]}`,
        what: `“${column.header}” does not hold numbers that are ${basisWords[basis.declared]}, which this file was declared to bring.`,
        fix: 'Declare the basis that the header names, or correct the header.'
      });
    } else if (!asked) {
      asked = true;
      problems.question({
        code: 'basis unknown',
        ...at,
        found: `“${column.header}”`,
        expected: 'a peak area, ng/mL in the vial, ng in the whole fraction, or ng/L of sample',
        what: `“${column.header}” does not say what its numbers are: peak areas, the content of the vial, of the whole fraction, or of the sample.`,
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

function valueColumn(
  column: PlannedColumn,
  { basis, factor }: Extract<Basis, { readonly kind: 'known' }>,
  beside: Beside,
  take: Take
): ValueColumn {
  take(column, 'value');
  const taken = (means: BesideMeaning): PlannedColumn | null => {
    const found = beside[means];
    if (!found) return null;
    take({ ...found, analyte: column.analyte }, means === 'internal standard area' ? 'internal area' : means);
    return found;
  };
  const internal = taken('internal standard area');
  const number = (
    means: BesideMeaning,
    target: 'min' | 'share'
  ): { column: number; factor: UnitFactor } | null => {
    const found = taken(means);
    return found && { column: found.column, factor: unitFactor(found.unit ?? '', target) ?? unchanged };
  };
  const qualifiers: QualifierColumns = {
    retentionTime: number('retention time', 'min'),
    ionRatio: number('ion ratio', 'share'),
    signalToNoise: taken('signal to noise')?.column ?? null,
    manualIntegration: taken('manual integration')?.column ?? null,
    manualCause: taken('manual integration cause')?.column ?? null
  };
  return {
    column: column.column,
    factor,
    basis,
    analyte: column.analyte,
    internalArea: basis === 'area' ? (internal?.column ?? null) : null,
    limit: limitColumn(beside.limit, basis, factor, () => taken('limit')),
    qualifiers: Object.values(qualifiers).some((each) => each !== null) ? qualifiers : null
  };
}

/** A limit with a unit of its own says nothing of a peak area. */
function limitColumn(
  column: PlannedColumn | undefined,
  basis: ReportedBasis,
  factor: UnitFactor,
  take: () => PlannedColumn | null
): NumberColumn | null {
  if (!column) return null;
  const own = column.unit === null ? factor : basis === 'area' ? null : unitFactor(column.unit, basis);
  if (!own) return null;
  take();
  return { column: column.column, factor: own };
}

function reportSeveral(
  first: PlannedColumn,
  second: PlannedColumn,
  differ: boolean,
  { sheet, orientation, headerRow, problems }: PlanContext
): void {
  const at = { sheet, row: headerRow };
  const found = `“${first.header}” and “${second.header}”`;
  const lines = linesInWords(orientation === 'analytes down', first.column, second.column);
  if (differ) {
    problems.question({
      code: 'basis unknown',
      ...at,
      column: first.column,
      found,
      expected: 'one of them',
      what: `${lines} bring the same results in two ways, ${found}. Which one is to be stored?`,
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
      what: `${lines} hold the same kind of result for the same analyte.`,
      fix: 'Remove one of them, or name in its header what it is.'
    });
  }
}

type BesideMeaning = (typeof besideMeanings)[number];
type Beside = Partial<Record<BesideMeaning, PlannedColumn>>;

/** Value column → what stands beside it: by the analyte in its header, else with the nearest value column on its left. */
function attachments(columns: readonly PlannedColumn[]): ReadonlyMap<number, Beside> {
  const found = new Map<number, Beside>();
  const values = columns.filter(({ means }) => means === 'area' || means === 'amount');
  const isLong = values.every(({ analyte }) => analyte === null);
  for (const column of columns) {
    const means = besideMeanings.find((each) => each === column.means);
    if (!means) continue;
    const owners = isLong
      ? values
      : column.analyte === null
        ? [values.findLast(({ column: left }) => left < column.column) ?? values[0]]
        : values.filter(({ analyte }) => analyte === column.analyte);
    for (const owner of owners) {
      if (!owner) continue;
      const beside = found.get(owner.column) ?? {};
      beside[means] ??= column;
      found.set(owner.column, beside);
    }
  }
  return found;
}

type Basis =
  | { readonly kind: 'known'; readonly basis: ReportedBasis; readonly factor: UnitFactor }
  | { readonly kind: 'contradicts'; readonly declared: ReportedBasis }
  | { readonly kind: 'open' };

/** A column that says what it holds is held against what was declared; one that does not takes it from there. */
function resolveBasis({ means, basis, unit }: PlannedColumn, declared: ReportedBasis | null): Basis {
  const stated = means === 'area' ? 'area' : (basis ?? (unit !== null && isAmount(unit) ? 'ng' : null));
  if (stated === null && (unit === null || !isConcentration(unit)))
    return declared ? { kind: 'known', basis: declared, factor: unchanged } : { kind: 'open' };
  const resolved = stated ?? ofConcentration(unit ?? '', declared);
  if (declared && resolved !== declared) return { kind: 'contradicts', declared };
  if (resolved === null) return { kind: 'open' };
  const factor = resolved === 'area' || unit === null ? unchanged : unitFactor(unit, resolved);
  return factor ? { kind: 'known', basis: resolved, factor } : { kind: 'open' };
}

/** A concentration is one of the vial or of the sample; in ng/L hardly anything but the sample is given. */
function ofConcentration(unit: string, declared: ReportedBasis | null): ReportedBasis | null {
  if (declared === 'vial' || declared === 'ng_per_l') return declared;
  return unitKey(unit) === 'ng/l' ? 'ng_per_l' : null;
}
