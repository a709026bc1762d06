import { columnLetters } from './cell-address';
import type { ColumnPlan } from './column-plan';
import { decimalEvidence, provenMark } from './decimal-evidence';
import type { DecimalEvidence } from './decimal-evidence';
import type { Problems } from './problems';
import { cellKinds } from './sheet';
import type { DecimalMark, Sheet } from './types';

/** What the number columns of a sheet prove about the decimal mark; only cells that hold text do. */
export function evidenceOf(
  sheet: Sheet,
  headerRow: number,
  plan: ColumnPlan
): ReadonlyMap<number, DecimalEvidence> {
  const numberColumns = [
    ...plan.values.flatMap(({ column, internalArea, limit, qualifiers }) => [
      column,
      internalArea,
      limit?.column ?? null,
      qualifiers?.retentionTime?.column ?? null,
      qualifiers?.ionRatio?.column ?? null,
      qualifiers?.signalToNoise ?? null
    ]),
    plan.finalVolume?.column ?? null,
    plan.dilution?.column ?? null,
    plan.aliquotShare?.column ?? null,
    plan.sampleVolume?.column ?? null,
    plan.sampleMass?.column ?? null
  ].filter((column) => column !== null);
  const texts = new Map(numberColumns.map((column): [number, Set<string>] => [column, new Set()]));
  const textKind = cellKinds.indexOf('text');
  for (let at = 0; at < sheet.rowNumbers.length; at++) {
    if ((sheet.rowNumbers[at] ?? 0) <= headerRow) continue;
    for (let index = sheet.rowStarts[at] ?? 0; index < (sheet.rowStarts[at + 1] ?? 0); index++) {
      if (sheet.kinds[index] !== textKind) continue;
      texts.get(sheet.columns[index] ?? 0)?.add(sheet.texts[sheet.values[index] ?? 0] ?? '');
    }
  }
  return new Map([...texts].map(([column, found]) => [column, decimalEvidence(found)]));
}

/** The mark of each column: as declared, else as the column proves, else, where it proves nothing, as the file does. */
export function decimalMarks(
  at: { readonly sheet: string; readonly headerRow: number; readonly isTurned: boolean },
  evidence: ReadonlyMap<number, DecimalEvidence>,
  fileEvidence: DecimalEvidence,
  declared: DecimalMark | null,
  problems: Problems
): (column: number) => DecimalMark | null {
  const marks = new Map<number, DecimalMark | null>();
  for (const [column, own] of evidence) {
    if (declared === null && own.point !== null && own.comma !== null) {
      const line = at.isTurned ? `Row ${column + 1}` : `Column ${columnLetters(column)}`;
      problems.question({
        code: 'mixed separators',
        sheet: at.sheet,
        row: at.headerRow,
        column,
        found: `“${own.point}” and “${own.comma}”`,
        expected: `one decimal mark in a ${at.isTurned ? 'row' : 'column'}`,
        what: `${line} has decimal points and decimal commas, “${own.point}” and “${own.comma}”. Each can be read in one way only; is the ${at.isTurned ? 'row' : 'column'} in order?`,
        fix: 'Confirm to read each as it stands, or make them uniform.'
      });
    }
    const isSilent = own.point === null && own.comma === null;
    marks.set(column, declared ?? provenMark(isSilent ? fileEvidence : own));
  }
  return (column) => marks.get(column) ?? declared;
}
