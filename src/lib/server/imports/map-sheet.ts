import type { MeasurementState, ReportedBasis } from '../../domain/vocabulary';
import type { ColumnPlan, NumberColumn, ValueColumn } from './column-plan';
import { mergeAwareReader } from './merged-cells';
import type { CellReader } from './merged-cells';
import type { NameMatcher } from './name-matcher';
import type { PlaceFinder } from './place-finder';
import type { ProblemList } from './problems';
import { readNumberCell } from './read-cell';
import { cellAt, isoToSerial, serialToIso } from './sheet';
import type { Cell, DecimalMark, ExperimentExpectation, Place, Sheet } from './types';
import { convert } from './units';
import { expectedWords } from './value-words';

/** A record before the checks that look at several rows at once. */
export interface DraftRecord {
  readonly sheet: string;
  readonly row: number;
  readonly column: number;
  readonly place: Place;
  /** How messages name it: "S4, Elution 1". */
  readonly placeName: string;
  readonly panelEntryId: string;
  readonly injection: number;
  readonly basis: ReportedBasis;
  readonly state: MeasurementState;
  readonly value: number | null;
  readonly limit: number | null;
  readonly rawText: string;
  readonly internalColumn: number | null;
  internalArea: number | null;
  finalVolumeMl: number | null;
  dilution: number | null;
  aliquotShare: number | null;
  readonly acquiredAt: string | null;
}

export interface SheetMapping {
  readonly sheet: Sheet;
  readonly plan: ColumnPlan;
  readonly headerRow: number;
  readonly analytes: NameMatcher<string>;
  readonly places: PlaceFinder;
  readonly decimalOf: (column: number) => DecimalMark | null;
  readonly problems: ProblemList;
}

interface RowPlace {
  readonly place: Place;
  readonly name: string;
}

/** Turns the rows below the header into records, one for each row and value column, and reports what is in the way. */
export function mapSheet(mapping: SheetMapping): readonly DraftRecord[] {
  const { sheet, plan, headerRow } = mapping;
  const merged = mergeAwareReader(sheet);
  const drafts: DraftRecord[] = [];
  for (const row of sheet.rowNumbers) {
    if (row <= headerRow || isBlankRow(mapping, merged, row)) continue;
    const place = placeOf(mapping, merged, row);
    const injection = injectionOf(mapping, row);
    const preparation = preparationOf(mapping, merged, row);
    for (const value of plan.values) {
      const panelEntryId = value.analyte ?? analyteOf(mapping, merged, row);
      // Read the cell even where the row found no place, so that all problems come at once.
      const draft = draftOf(mapping, row, value, { place, panelEntryId, injection, preparation });
      if (draft) drafts.push(draft);
    }
  }
  return drafts;
}

function textOf(cell: Cell | null): string {
  return cell === null ? '' : cell.raw.trim();
}

/** Without a label, analyte and numbers a row says nothing (it may hold a remark or a rule). */
function isBlankRow({ plan }: SheetMapping, merged: CellReader, row: number): boolean {
  const columns = [
    plan.sample,
    plan.analyte,
    plan.cas,
    ...plan.values.flatMap(({ column, internalArea }) => [column, internalArea])
  ];
  return columns.every((column) => column === null || textOf(merged(row, column)) === '');
}

function placeOf(mapping: SheetMapping, merged: CellReader, row: number): RowPlace | null {
  const { sheet, plan, places, problems } = mapping;
  const label = textOf(merged(row, plan.sample));
  const at = { sheet: sheet.name, row, column: plan.sample };
  if (label === '') {
    problems.error({
      code: 'missing sample',
      ...at,
      found: 'an empty cell',
      expected: 'a sample label or a calibration level',
      what: 'This row has results but no sample.',
      fix: 'Write the label of the sample, or remove the row.'
    });
    return null;
  }
  const experiment = experimentOf(mapping, merged, row);
  if (experiment === 'unknown') return null;
  const found = places.find(label, experiment);
  switch (found.kind) {
    case 'level':
      return { place: found, name: label };
    case 'replicate':
      return replicatePlace(
        mapping,
        merged,
        row,
        found.experiment,
        found.replicate.id,
        found.replicate.takesFraction,
        label
      );
    case 'many':
      problems.oncePer(label, 'error', {
        code: 'ambiguous sample',
        ...at,
        found: `“${label}”`,
        expected: 'a label that means one sample',
        what: `“${label}” can be ${found.places.slice(0, 4).join(', or ')}.`,
        fix: 'Bring the file from the page of the experiment, or add a column “Experiment” with its title.'
      });
      return null;
    case 'none':
      problems.oncePer(label, 'error', {
        code: 'unknown sample',
        ...at,
        found: `“${label}”`,
        expected: 'the label of a replicate, or a calibration level',
        what: `No replicate and no calibration level is called “${label}”.${found.nearest ? ` Is ${found.nearest} meant?` : ''}`,
        fix: 'Correct the label, add the replicate to its experiment, or remove the rows.'
      });
      return null;
  }
}

function experimentOf(
  mapping: SheetMapping,
  merged: CellReader,
  row: number
): ExperimentExpectation | null | 'unknown' {
  const { sheet, plan, places, problems } = mapping;
  const title = plan.experiment === null ? '' : textOf(merged(row, plan.experiment));
  if (title === '' || plan.experiment === null) return null;
  const found = places.experimentByTitle(title);
  if (found) return found;
  problems.oncePer(title, 'error', {
    code: 'unknown experiment',
    sheet: sheet.name,
    row,
    column: plan.experiment,
    found: `“${title}”`,
    expected: 'the title of one experiment that this file may hold',
    what: `No experiment that this file may hold is called “${title}”, or several are.`,
    fix: 'Correct the title, or leave the cell empty where the label alone is enough.'
  });
  return 'unknown';
}

function replicatePlace(
  { sheet, plan, places, problems }: SheetMapping,
  merged: CellReader,
  row: number,
  experiment: ExperimentExpectation,
  replicateId: string,
  takesFraction: boolean,
  label: string
): RowPlace | null {
  const text = plan.fraction === null ? '' : textOf(merged(row, plan.fraction));
  const at = { sheet: sheet.name, row, column: plan.fraction ?? plan.sample };
  const place = (fractionId: string | null, name: string): RowPlace => ({
    place: { kind: 'extract', experimentId: experiment.id, replicateId, fractionId },
    name
  });
  const names = experiment.fractions.map(({ name }) => name).join(', ');
  if (!takesFraction) {
    if (text === '' || /^[-–—]$/.test(text)) return place(null, label);
    problems.oncePer(`${label} ${text}`, 'error', {
      code: 'fraction not expected',
      ...at,
      found: `“${text}”`,
      expected: 'an empty cell',
      what: `${label} is a standard and has no fractions, but “${text}” is given as one.`,
      fix: 'Empty the cell.'
    });
    return null;
  }
  const [single, second] = experiment.fractions;
  if (text === '') {
    if (single && !second) return place(single.id, label);
    problems.oncePer(`${experiment.id} missing`, 'error', {
      code: 'missing fraction',
      ...at,
      found: plan.fraction === null ? 'no column with the fraction' : 'an empty cell',
      expected: names === '' ? 'an experiment with fractions' : `one of: ${names}`,
      what:
        names === ''
          ? `${experiment.title} has no fractions yet, so that nothing of ${label} can be placed.`
          : `${label} has several fractions, and this row does not say which one it is.`,
      fix: names === '' ? 'Add the fractions to the experiment first.' : 'Name the fraction in each row.'
    });
    return null;
  }
  const match = places.fractions(experiment).match(text);
  if (match.kind === 'one') return place(match.value.id, `${label}, ${match.value.name}`);
  const nearest = match.kind === 'none' ? places.fractions(experiment).nearest(text) : null;
  problems.oncePer(`${experiment.id} ${text}`, 'error', {
    code: match.kind === 'many' ? 'ambiguous fraction' : 'unknown fraction',
    ...at,
    found: `“${text}”`,
    expected: names === '' ? 'an experiment with fractions' : `one of: ${names}`,
    what:
      match.kind === 'many'
        ? `“${text}” can be more than one fraction of ${experiment.title}.`
        : `${experiment.title} has no fraction called “${text}”.${nearest ? ` Is ${nearest} meant?` : ''}`,
    fix: 'Correct the name, or add the fraction to the experiment.'
  });
  return null;
}

function analyteOf(
  { sheet, plan, analytes, problems }: SheetMapping,
  merged: CellReader,
  row: number
): string | null {
  const column = plan.analyte ?? plan.cas ?? 0;
  const cells = [plan.analyte, plan.cas].map((each) => (each === null ? null : merged(row, each)));
  const [name, cas] = cells.map(textOf);
  const text = name || cas || '';
  const at = { sheet: sheet.name, row, column, expected: 'a name, synonym or CAS number of the panel' };
  if (text === '') {
    problems.error({
      code: 'missing analyte',
      ...at,
      found: 'an empty cell',
      what: 'This row has no analyte.',
      fix: 'Write the name of the analyte, or remove the row.'
    });
    return null;
  }
  const match = analytes.match(text);
  if (match.kind === 'one') return match.value;
  const byCas = cas && cas !== text ? analytes.match(cas) : null;
  if (byCas?.kind === 'one') return byCas.value;
  const nearest = match.kind === 'none' ? analytes.nearest(text) : null;
  const isDate = cells.some((cell) => cell?.kind === 'date');
  problems.oncePer(text, 'error', {
    code: match.kind === 'many' ? 'ambiguous analyte' : 'unknown analyte',
    ...at,
    found: `“${text}”`,
    what:
      match.kind === 'many'
        ? `“${text}” can be more than one analyte of the panel.`
        : isDate
          ? `This cell shows the date ${text} where an analyte belongs; some CAS numbers are turned into dates by spreadsheet programs.`
          : `“${text}” is not on the panel.${nearest ? ` Is ${nearest} meant?` : ''}`,
    fix: isDate
      ? 'Format the cell as text and type the number again.'
      : 'Correct the name, add it to the panel, or remove the rows.'
  });
  return null;
}

/** @returns null where the number given is none; the problem is reported */
function injectionOf({ sheet, plan, decimalOf, problems }: SheetMapping, row: number): number | null {
  if (plan.injection === null) return 1;
  const column = plan.injection;
  const cell = cellAt(sheet, row, column);
  const expected = 'an injection number (1, 2, 3 …)';
  const context = { sheet: sheet.name, row, column, expected, decimal: decimalOf(column) };
  const number = readNumberCell(cell, context, problems);
  if (number.state === 'missing') return 1;
  if (number.state === 'unusable') return null;
  if (
    number.state === 'value' &&
    Number.isInteger(number.value) &&
    number.value >= 1 &&
    number.value <= 32_767
  )
    return number.value;
  problems.error({
    code: 'injection number',
    sheet: sheet.name,
    row,
    column,
    found: `“${textOf(cell)}”`,
    expected,
    what: `“${textOf(cell)}” is no injection number.`,
    fix: 'Number the injections of one vial 1, 2, 3, or leave the cell empty if there is one.'
  });
  return null;
}

interface Preparation {
  readonly finalVolumeMl: number | null;
  readonly dilution: number | null;
  readonly aliquotShare: number | null;
  readonly acquiredAt: string | null;
}

function preparationOf(mapping: SheetMapping, merged: CellReader, row: number): Preparation {
  const { plan } = mapping;
  return {
    finalVolumeMl: bounded(
      mapping,
      merged,
      row,
      plan.finalVolume,
      'a final volume above zero',
      'not positive',
      (v) => v > 0
    ),
    dilution: bounded(
      mapping,
      merged,
      row,
      plan.dilution,
      'a dilution of 1 or more',
      'dilution below one',
      (v) => v >= 1
    ),
    aliquotShare: bounded(
      mapping,
      merged,
      row,
      plan.aliquotShare,
      'a share above 0 and up to 1',
      'share outside range',
      (v) => v > 0 && v <= 1
    ),
    acquiredAt: acquiredAtOf(mapping, row)
  };
}

function bounded(
  { sheet, decimalOf, problems }: SheetMapping,
  merged: CellReader,
  row: number,
  from: NumberColumn | null,
  expected: string,
  code: 'not positive' | 'dilution below one' | 'share outside range',
  isWithin: (value: number) => boolean
): number | null {
  if (!from) return null;
  const cell = merged(row, from.column);
  const at = { sheet: sheet.name, row, column: from.column, expected };
  const number = readNumberCell(cell, { ...at, decimal: decimalOf(from.column) }, problems);
  if (number.state === 'missing' || number.state === 'unusable') return null;
  const value = number.state === 'value' ? convert(number.value, from.factor) : null;
  if (value !== null && isWithin(value)) return value;
  problems.error({
    code: value === null ? 'not a number' : code,
    ...at,
    found: `“${textOf(cell)}”`,
    what: `“${textOf(cell)}” stands where ${expected} belongs.`,
    fix: 'Correct the cell, or leave it empty.'
  });
  return null;
}

function acquiredAtOf({ sheet, plan, problems }: SheetMapping, row: number): string | null {
  if (plan.acquiredAt === null) return null;
  const cell = cellAt(sheet, row, plan.acquiredAt);
  if (!cell || textOf(cell) === '') return null;
  if (cell.kind === 'date') return cell.raw;
  const serial = cell.kind === 'text' ? isoToSerial(cell.value.trim()) : null;
  if (serial !== null) return serialToIso(serial);
  problems.oncePer('column', 'question', {
    code: 'date not understood',
    sheet: sheet.name,
    row,
    column: plan.acquiredAt,
    found: `“${textOf(cell)}”`,
    expected: 'a date cell, or a text such as 2026-03-04 16:20',
    what: `“${textOf(cell)}” is not read as a date, since day and month could be swapped. Store these rows without it?`,
    fix: 'Confirm to leave the time out, or write it as year-month-day.'
  });
  return null;
}

interface RowFacts {
  readonly place: RowPlace | null;
  readonly panelEntryId: string | null;
  readonly injection: number | null;
  readonly preparation: Preparation;
}

function draftOf(
  mapping: SheetMapping,
  row: number,
  value: ValueColumn,
  facts: RowFacts
): DraftRecord | null {
  const { sheet, decimalOf, problems } = mapping;
  const cell = cellAt(sheet, row, value.column);
  const expected = expectedWords[value.basis];
  const context = {
    sheet: sheet.name,
    row,
    column: value.column,
    expected,
    decimal: decimalOf(value.column)
  };
  const number = readNumberCell(cell, context, problems);
  const internalArea = internalAreaOf(mapping, row, value);
  const { place, panelEntryId, injection, preparation } = facts;
  if (number.state === 'unusable' || !place || panelEntryId === null || injection === null) return null;
  const amount = number.state === 'value' ? convert(number.value, value.factor) : null;
  if (amount !== null && !checkSign(mapping, row, value, amount)) return null;
  const limit = number.state === 'below' || number.state === 'above' ? number.limit : null;
  return {
    sheet: sheet.name,
    row,
    column: value.column,
    place: place.place,
    placeName: place.name,
    panelEntryId,
    injection,
    basis: value.basis,
    state: number.state,
    value: amount,
    limit: limit === null ? null : convert(limit, value.factor),
    rawText: cell?.raw ?? '',
    internalColumn: value.internalArea,
    internalArea,
    ...preparation
  };
}

function checkSign(
  { sheet, problems }: SheetMapping,
  row: number,
  value: ValueColumn,
  amount: number
): boolean {
  const at = {
    sheet: sheet.name,
    row,
    column: value.column,
    found: String(amount),
    expected: expectedWords[value.basis]
  };
  if (amount < 0 && value.basis === 'area') {
    problems.error({
      code: 'negative',
      ...at,
      what: `The peak area ${amount} is below zero.`,
      fix: 'Integrate the peak again, or write ND if there is none.'
    });
    return false;
  }
  if (amount < 0) {
    problems.question({
      code: 'negative',
      ...at,
      what: `${amount} is below zero. Is this what was calculated, and not a slip?`,
      fix: 'Confirm to store it as it is, or write ND or the limit (<x) instead.'
    });
  }
  if (amount === 0 && value.basis === 'area') {
    problems.oncePer('zero', 'note', {
      code: 'zero area',
      ...at,
      what: 'This area is exactly 0. It is stored as the number zero, which is not the same as not detected.',
      fix: 'Write ND where no peak was found, so that its limit is taken into account.'
    });
  }
  return true;
}

function internalAreaOf(
  { sheet, decimalOf, problems }: SheetMapping,
  row: number,
  value: ValueColumn
): number | null {
  const column = value.internalArea;
  if (column === null) return null;
  const cell = cellAt(sheet, row, column);
  const expected = 'the peak area of the internal standard';
  const number = readNumberCell(
    cell,
    { sheet: sheet.name, row, column, expected, decimal: decimalOf(column) },
    problems
  );
  if (number.state === 'missing' || number.state === 'unusable') return null;
  if (number.state === 'value' && number.value > 0) return number.value;
  problems.error({
    code: 'not positive',
    sheet: sheet.name,
    row,
    column,
    found: `“${textOf(cell)}”`,
    expected: `${expected}, above zero`,
    what: `“${textOf(cell)}” cannot be divided by: ${expected} has to be above zero.`,
    fix: 'Correct the area. An injection without its internal standard has to be left out or repeated.'
  });
  return null;
}
